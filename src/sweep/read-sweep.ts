/** Bytes of any sweep file into a sweep: which reader, and what to say when none fits. */
import { fail, type Outcome } from '../outcome.ts';
import { cleanForDisplay, decodeText } from './clean-text.ts';
import { hasHeader, readDelimitedText } from './delimited-text.ts';
import type { Sweep } from './sweep.ts';
import { portsFromName, readTouchstone } from './touchstone.ts';
import { readOptionLine } from './touchstone-option-line.ts';

/** Largest sweep file that is read, bytes (256 MB). */
export const LARGEST_SWEEP_BYTES = 256 * 1024 * 1024;

/** Text looked at to tell one format from another, characters. */
const SNIFFED_LENGTH = 65_536;

/**
 * Reads Touchstone (any version) or a table with a header, told apart by content first and by name second.
 *
 * @param bytes The whole file.
 * @param options.file Name as the user gave it, `-` for standard input; it is shown in problems, and its extension
 *   tells the ports of a Touchstone 1.1 file.
 * @param options.port Port to read, counted from 1; 1 unless given.
 * @returns The sweep with notices, or every problem found, up to a limit; never both, never a part of a sweep.
 */
export function readSweep(
  bytes: Uint8Array,
  options: { readonly file: string; readonly port?: number },
): Outcome<Sweep> {
  const file = cleanForDisplay(options.file);
  if (bytes.length > LARGEST_SWEEP_BYTES) {
    return fail({
      code: 'sweep-too-large',
      file,
      what: `is larger than ${LARGEST_SWEEP_BYTES / 1024 / 1024} MB`,
      mend: 'save the sweep with fewer points or ports',
    });
  }
  const text = decodeText(bytes, file);
  if (!text.ok) return text;
  const request = { file: options.file, port: options.port ?? 1 };
  switch (formatOf(text.value, options.file)) {
    case 'touchstone':
      return readTouchstone(text.value, request);
    case 'delimited':
      return readDelimitedText(text.value, request);
    case 'empty':
      return fail({ code: 'sweep-empty', file, what: 'is empty', mend: 'save the sweep again' });
    case 'unknown':
      return fail({
        code: 'sweep-format',
        file,
        what: 'is neither Touchstone (no option line that begins with "#") nor a table with named columns',
        found: cleanForDisplay(text.value.trim(), 60),
        mend: 'save the sweep as Touchstone (.s1p), or put a header like "frequency_hz,real,imaginary" above its columns',
      });
  }
}

function formatOf(text: string, file: string): 'touchstone' | 'delimited' | 'empty' | 'unknown' {
  const head = text.length > SNIFFED_LENGTH ? text.slice(0, SNIFFED_LENGTH) : text;
  if (head.length === text.length && head.trim() === '') return 'empty';
  if (portsFromName(file) !== null || /\.ts$/i.test(file)) return 'touchstone';
  const first = firstLineWithout(COMMENTS_AND_MARKS, head);
  if (first.startsWith('[')) return 'touchstone';
  const marked = firstLineWithout(COMMENTS, head);
  if (
    marked.startsWith('#') &&
    /^[-+.\d]/.test(first) &&
    !('code' in readOptionLine(marked.replace(/!.*/, ''), 1))
  ) {
    return 'touchstone';
  }
  if (hasHeader(head) || /\.(csv|tsv)$/i.test(file)) return 'delimited';
  return marked.startsWith('#') && marked !== first ? 'touchstone' : 'unknown';
}

/** Both formats' remarks begin with `!`; a `#` begins an option line in one, a remark in the other. */
const COMMENTS = /^[ \t]*([^!\s][^\n]*)/m;
const COMMENTS_AND_MARKS = /^[ \t]*([^!#\s][^\n]*)/m;

/** The first line that the pattern takes, trimmed; empty when there is none. */
function firstLineWithout(pattern: RegExp, text: string): string {
  return pattern.exec(text)?.[1]?.trim() ?? '';
}
