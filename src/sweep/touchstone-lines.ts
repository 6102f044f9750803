/** Walks through a Touchstone text line by line, comments cut off and kept apart. */
import { cleanForDisplay } from './clean-text.ts';

/** Most comment lines kept, and the longest of them in characters. */
const COMMENT_LIMIT = 200;
const COMMENT_LENGTH = 500;

/** A place in the text: the content of the current line is `text.slice(start, end)`, without its comment. */
export type TouchstoneLines = {
  readonly text: string;
  /** Counted from 1; 0 before the first line. */
  readonly line: number;
  readonly start: number;
  readonly end: number;
  /** Code of the first character that is not blank; it always exists on a line with content. */
  readonly firstCode: number;
  /** Goes to the next line with content other than a comment; false at the end of the text. */
  next(): boolean;
  /** Content of the current line, trimmed; the first `limit` characters. */
  content(limit?: number): string;
  /** Whole-line comments met so far, cleaned. */
  readonly comments: readonly string[];
};

/**
 * @param text With LF as its line end.
 * @source references.md section 7: a comment runs from `!` to the end of the line.
 */
export function createTouchstoneLines(text: string): TouchstoneLines {
  const comments: string[] = [];
  let line = 0;
  let start = 0;
  let end = 0;
  let firstCode = 0;
  let nextStart = 0;
  let nextMark = text.indexOf('!');

  function step(): void {
    line++;
    start = nextStart;
    const newline = text.indexOf('\n', start);
    const lineEnd = newline === -1 ? text.length : newline;
    nextStart = lineEnd + 1;
    if (nextMark !== -1 && nextMark < start) nextMark = text.indexOf('!', start);
    end = nextMark !== -1 && nextMark < lineEnd ? nextMark : lineEnd;
    while (start < end && isSpace(text.charCodeAt(start))) start++;
    while (end > start && isSpace(text.charCodeAt(end - 1))) end--;
    if (start === end && end < lineEnd && comments.length < COMMENT_LIMIT && nextMark === end) {
      const comment = cleanForDisplay(text.slice(end + 1, Math.min(lineEnd, end + 10_000)), COMMENT_LENGTH);
      if (comment !== '') comments.push(comment);
    }
  }

  return {
    text,
    get line() {
      return line;
    },
    get start() {
      return start;
    },
    get end() {
      return end;
    },
    get firstCode() {
      return firstCode;
    },
    next() {
      while (nextStart <= text.length) {
        step();
        if (start < end) {
          firstCode = text.charCodeAt(start);
          return true;
        }
      }
      return false;
    },
    content(limit = 10_000) {
      return text.slice(start, Math.min(end, start + limit));
    },
    comments,
  };
}

function isSpace(code: number): boolean {
  return code === 32 || code === 9 || code === 12 || code === 0xa0;
}
