/**
 * Bytes into text, and text into something safe to show.
 *
 * A sweep comes from any instrument, spreadsheet or mail program; its bytes are untrusted twice: they may not be
 * text at all, and what text they hold may try to steer a terminal.
 */
import { fail, type Outcome, succeed } from '../outcome.ts';

/** How much of a file is looked at to tell text from anything else, characters. */
const SNIFFED_LENGTH = 65_536;

/** Share of control characters above which a file is not text. From memory: plain text has none but tab and line ends. */
const CONTROL_SHARE_LIMIT = 0.01;

/** First bytes of things that people hand over by mistake. @source the formats' own signatures, from memory. */
const SIGNATURES: readonly { readonly bytes: readonly number[]; readonly name: string }[] = [
  { bytes: [0x50, 0x4b, 0x03, 0x04], name: 'a ZIP archive or a spreadsheet' },
  { bytes: [0x1f, 0x8b], name: 'a gzip archive' },
  { bytes: [0x25, 0x50, 0x44, 0x46, 0x2d], name: 'a PDF document' },
  { bytes: [0x89, 0x50, 0x4e, 0x47], name: 'a PNG picture' },
  { bytes: [0xff, 0xd8, 0xff], name: 'a JPEG picture' },
  { bytes: [0xd0, 0xcf, 0x11, 0xe0], name: 'an old office document' },
  { bytes: [0x53, 0x51, 0x4c, 0x69, 0x74, 0x65, 0x20], name: 'a SQLite database' },
];

/**
 * Text of a file: UTF-8 with or without a byte-order mark, UTF-16 by its mark, else one character a byte (so that
 * a stray 8-bit byte in a comment harms nobody). Line ends come out as LF whatever they were; an old end-of-file
 * mark (0x1A) at the very end is dropped.
 *
 * @param file Name shown in problems.
 * @returns The text, or a problem when the bytes are no text.
 * @source references.md section 7: CR, CR LF and LF are read, 8-bit bytes tolerated (common practice).
 */
export function decodeText(bytes: Uint8Array, file: string): Outcome<string> {
  const signature = SIGNATURES.find((s) => s.bytes.every((byte, index) => bytes[index] === byte));
  if (signature) return fail(binaryProblem(file, `is ${signature.name}, not text`));
  const text = withoutEndMark(decode(bytes));
  if (looksBinary(text)) return fail(binaryProblem(file, 'holds binary data, not text'));
  return succeed(text.includes('\r') ? text.replace(/\r\n?/g, '\n') : text);
}

/**
 * One line that is safe on a terminal and in a table: escape sequences, control characters, bidirectional overrides
 * and invisible characters are gone, runs of white space are one blank, and the length is bounded.
 *
 * @param maxLength Longest result in characters, at least 1; what is longer ends in an ellipsis.
 * @source ECMA-48 (escape and control sequences); Unicode UAX 9 (bidirectional controls).
 */
export function cleanForDisplay(text: string, maxLength = 200): string {
  if (text.length <= maxLength && CLEAN_ALREADY.test(text)) return text;
  // A hostile line may be as long as the file: look at no more than could be shown.
  const head = text.length > maxLength * 8 + 1000 ? text.slice(0, maxLength * 8 + 1000) : text;
  const clean = head
    .replace(ESCAPE_SEQUENCES, '')
    .replace(INVISIBLE_CHARACTERS, '')
    .replace(/[\p{Cc}\s\u2028\u2029]+/gu, ' ')
    .replace(/\p{Cs}/gu, '\ufffd')
    .trim();
  const characters = Array.from(clean);
  if (characters.length <= maxLength) return clean;
  return `${characters
    .slice(0, maxLength - 1)
    .join('')
    .trimEnd()}…`;
}

/** Words of ASCII with single blanks between: most of what comes, and the tables for all of Unicode cost 8 ms at a start. */
const CLEAN_ALREADY = /^(?:[!-~]+(?: [!-~]+)*)?$/;

/** CSI sequences, then strings (OSC, DCS, SOS, PM, APC) up to their end, then the two-character escapes. */
const ESCAPE_SEQUENCES =
  /(?:\x1b\[|\x9b)[0-?]*[ -/]*[@-~]?|(?:\x1b[\]PX^_]|[\x9d\x90\x98\x9e\x9f])[^\x07\x1b\x9c]*(?:\x07|\x1b\\|\x9c)?|\x1b[ -/]*[0-~]?/g;

/** Bidirectional marks and overrides, zero-width characters (joiners stay: scripts need them), marks, tags. */
const INVISIBLE_CHARACTERS =
  /[\u00ad\u061c\u180e\u200b\u200e\u200f\u202a-\u202e\u2060-\u206f\ufeff\ufff9-\ufffb\u{e0000}-\u{e007f}]/gu;

function decode(bytes: Uint8Array): string {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return new TextDecoder('utf-16le').decode(bytes);
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return new TextDecoder('utf-16be').decode(bytes);
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    return new TextDecoder('windows-1252').decode(bytes);
  }
}

function withoutEndMark(text: string): string {
  return text.endsWith('\x1a') ? text.slice(0, -1) : text;
}

/** All controls but tab, line ends and form feed. */
const CONTROLS_IN_BINARY = /[\u0000-\u0008\u000b\u000e-\u001f\u007f]/g;

function looksBinary(text: string): boolean {
  const sniffed = text.length > SNIFFED_LENGTH ? text.slice(0, SNIFFED_LENGTH) : text;
  if (sniffed.includes('\0')) return true;
  const controls = sniffed.match(CONTROLS_IN_BINARY)?.length ?? 0;
  return controls > sniffed.length * CONTROL_SHARE_LIMIT;
}

function binaryProblem(file: string, what: string) {
  return {
    code: 'sweep-binary',
    file,
    what,
    mend: 'give the sweep as text: Touchstone (.s1p) or a table with a header (.csv), saved as UTF-8',
  };
}
