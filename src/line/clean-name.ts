/** Names and labels come from files that others wrote: they are made harmless once, where they are read. */

/** Longest name that is kept, in code points: about one line of a terminal. */
export const LONGEST_NAME = 80;

/** Strings for the terminal itself (title, clipboard, ...), to their end or to the end of the text. */
const TERMINAL_STRING =
  /(?:\u001b[\]PX^_]|[\u0090\u0098\u009d-\u009f])[^\u0007\u001b\u009c]*(?:\u0007|\u001b\\|\u009c)?/gu;
/** Control sequences such as colours and cursor moves. */
const CONTROL_SEQUENCE = /(?:\u001b\[|\u009b)[0-?]*[ -/]*[@-~]?/gu;
/** Other two-character escapes. */
const ESCAPE = /\u001b[ -/]*[0-~]?/gu;
const LINE_OR_TAB = /[\t-\r\u0085\u2028\u2029]/gu;
const CONTROL = /[\u0000-\u001f\u007f-\u009f]/gu;
/** Marks that turn the reading direction, or that take no room and hide. */
const INVISIBLE =
  /[\u00ad\u061c\u200b\u200e\u200f\u202a-\u202e\u2060-\u206f\ufeff\ufff9-\ufffb\u{e0000}-\u{e007f}]/gu;
const LONE_SURROGATE = /\p{Surrogate}/gu;

/**
 * Makes a name from a file safe to show: no escape sequences, control characters, direction marks or
 * hidden characters, one line, bounded length.
 *
 * @param longest Code points kept; a longer name ends in "…".
 * @returns The cleaned text; empty when nothing visible was left.
 */
export function cleanName(text: string, longest: number = LONGEST_NAME): string {
  // Only the start can be kept, so a name of megabytes costs no more than a long one.
  const plain = text
    .slice(0, 64 * longest)
    .replace(TERMINAL_STRING, '')
    .replace(CONTROL_SEQUENCE, '')
    .replace(ESCAPE, '')
    .replace(LINE_OR_TAB, ' ')
    .replace(CONTROL, '')
    .replace(INVISIBLE, '')
    .replace(LONE_SURROGATE, '\ufffd')
    .replace(/\s+/gu, ' ')
    .trim();
  const points = Array.from(plain);
  return points.length <= longest
    ? plain
    : `${points
        .slice(0, longest - 1)
        .join('')
        .trimEnd()}…`;
}
