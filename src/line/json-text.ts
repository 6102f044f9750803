/** JSON as people write it by hand: strict, but every complaint names the line and how to mend it. */
import { createScanner, findNodeAtLocation, type Node, parseTree, printParseErrorCode } from 'jsonc-parser';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanName } from './clean-name.ts';

/** Way to a value: keys, and places in a list counted from 0. */
export type JsonPath = readonly (string | number)[];

/** A parsed text that still knows where everything stands. */
export type JsonText = {
  readonly value: unknown;
  /** Problems that parsing alone can see: keys given twice, keys that no file of ours has. */
  readonly problems: readonly Problem[];
  /** Line of a value, counted from 1; of the nearest value around it where it is missing. */
  readonly lineOf: (path: JsonPath) => number;
  /** Line of the key that leads to a value, counted from 1. */
  readonly lineOfKey: (path: JsonPath) => number;
  /** The value as it is written in the text, cleaned and cut to a short piece. */
  readonly written: (path: JsonPath) => string;
};

/** Characters of a text that is read: a hundred times the largest cable file. */
const LONGEST_TEXT = 4_000_000;
/** Nesting that is followed; our files need six. */
const DEEPEST = 32;
/** Code points of the text that a problem quotes. */
const LONGEST_QUOTE = 60;
/** Keys that JavaScript objects treat specially; no schema can see them, so they are refused here. */
const SPECIAL_KEYS: ReadonlySet<string> = new Set(['__proto__', 'constructor', 'prototype']);

/**
 * Parses strict JSON (a byte order mark at the start is forgiven).
 *
 * @param file Name for the problems.
 * @returns The value with its places, or the first syntax error; what follows one is mostly its echo.
 */
export function parseJsonText(text: string, file: string): Outcome<JsonText> {
  if (text.startsWith('\ufeff')) text = text.slice(1);
  const refusal = refuseBeforeParsing(text, file);
  if (refusal !== null) return fail(refusal);

  const errors: { error: number; offset: number; length: number }[] = [];
  const root = parseTree(text, errors, { disallowComments: true, allowTrailingComma: false });
  const first = errors[0];
  if (first !== undefined) return fail(syntaxProblem(text, file, first));
  if (root === undefined) return fail(emptyProblem(file));

  const lineAt = lineCounter(text);
  const problems: Problem[] = [];
  const value = plainValue(root, (key, twice) =>
    problems.push(keyProblem(text, file, lineAt(key.offset), key, twice)),
  );
  const nearestNode = (path: JsonPath): Node => {
    for (let length = path.length; length > 0; length--) {
      const node = findNodeAtLocation(root, path.slice(0, length));
      if (node !== undefined) return node;
    }
    return root;
  };
  return succeed({
    value,
    problems,
    lineOf: (path) => lineAt(nearestNode(path).offset),
    lineOfKey: (path) => {
      const node = nearestNode(path);
      return lineAt(node.parent?.type === 'property' ? node.parent.offset : node.offset);
    },
    written: (path) => {
      const node = nearestNode(path);
      return quote(text, node.offset, node.length);
    },
  });
}

function refuseBeforeParsing(text: string, file: string): Problem | null {
  if (text.trim() === '') return emptyProblem(file);
  if (text.length > LONGEST_TEXT) {
    return {
      code: 'json-size',
      file,
      what: 'the file is far too large for what it should hold',
      found: `${text.length} characters`,
      mend: `give a file of at most ${LONGEST_TEXT} characters`,
    };
  }
  // The parser calls itself for each level, so a text of brackets only could exhaust the stack.
  const scanner = createScanner(text, true);
  let depth = 0;
  let offset = -1;
  for (;;) {
    scanner.scan();
    if (scanner.getTokenOffset() === offset || scanner.getTokenOffset() >= text.length) return null;
    offset = scanner.getTokenOffset();
    const start = text[offset];
    if (start === '{' || start === '[') depth++;
    else if (start === '}' || start === ']') depth--;
    if (depth > DEEPEST) {
      return {
        code: 'json-depth',
        file,
        line: lineCounter(text)(offset),
        what: `more than ${DEEPEST} brackets are open at once`,
        found: quote(text, offset, LONGEST_QUOTE),
        mend: 'close the brackets of each section where it ends',
      };
    }
  }
}

function emptyProblem(file: string): Problem {
  return {
    code: 'json-empty',
    file,
    what: 'the file is empty',
    mend: 'check that the right file was given, and that it was saved',
  };
}

/** What each of the parser's complaints means on site, and how it is usually mended. */
const SYNTAX: Readonly<Record<string, readonly [what: string, mend: string]>> = {
  InvalidSymbol: ['this is not JSON', 'put text in double quotes; other words are true, false and null only'],
  InvalidNumberFormat: ['this is not a number', 'write numbers like 46, 0.88 or 1e-3'],
  PropertyNameExpected: [
    'a key in double quotes should stand here',
    'remove a comma before }, or quote the key',
  ],
  ValueExpected: ['a value should stand here', 'remove a comma before ], or write the missing value'],
  ColonExpected: ['a colon should stand here', 'write "key": value'],
  CommaExpected: ['a comma should stand here', 'put a comma between one entry and the next'],
  CloseBraceExpected: ['a closing } is missing', 'close each { with a }'],
  CloseBracketExpected: ['a closing ] is missing', 'close each [ with a ]'],
  EndOfFileExpected: ['the file should end here', 'remove what follows the last }'],
  InvalidCommentToken: [
    'comments are not allowed',
    'remove the comment; a "label" or "note" can hold the words',
  ],
  UnexpectedEndOfComment: ['a comment has no end', 'remove the comment'],
  UnexpectedEndOfString: ['a text has no closing quote on its line', 'close it with "'],
  UnexpectedEndOfNumber: ['a number is cut off', 'write numbers like 46, 0.88 or 1e-3'],
  InvalidUnicode: ['a \\u must be followed by four hexadecimal digits', 'write the character itself'],
  InvalidEscapeCharacter: ['a backslash is followed by the wrong character', 'write \\\\ for a backslash'],
  InvalidCharacter: ['a text holds a control character', 'remove it, or write a line break as \\n'],
};

function syntaxProblem(
  text: string,
  file: string,
  error: { readonly error: number; readonly offset: number; readonly length: number },
): Problem {
  const [what, mend] = SYNTAX[printParseErrorCode(error.error)] ?? ['this is not JSON', 'check the line'];
  // The parser marks a missing sign at the token before which it should stand, or at the very end.
  const length = Math.max(error.length, 1);
  return {
    code: 'json-syntax',
    file,
    line: lineCounter(text)(Math.min(error.offset, text.trimEnd().length)),
    what,
    found: error.offset >= text.trimEnd().length ? 'the end of the file' : quote(text, error.offset, length),
    mend,
  };
}

function keyProblem(text: string, file: string, line: number, key: Node, twice: boolean): Problem {
  const found = quote(text, key.offset, key.length);
  return twice
    ? {
        code: 'json-key-twice',
        file,
        line,
        what: `the key ${found} is given twice`,
        found,
        mend: 'keep one of them',
      }
    : {
        code: 'unknown-key',
        file,
        line,
        what: `the key ${found} means nothing here`,
        found,
        mend: 'remove it',
      };
}

/** Plain values from the tree; objects without a prototype, so that no key can mean anything by itself. */
function plainValue(node: Node, badKey: (key: Node, twice: boolean) => void): unknown {
  if (node.type === 'array') return (node.children ?? []).map((child) => plainValue(child, badKey));
  if (node.type !== 'object') return node.value;
  const object: Record<string, unknown> = Object.create(null);
  for (const property of node.children ?? []) {
    const [key, child] = property.children ?? [];
    if (key === undefined || child === undefined) continue;
    const name = String(key.value);
    if (SPECIAL_KEYS.has(name)) badKey(key, false);
    else if (Object.hasOwn(object, name)) badKey(key, true);
    else object[name] = plainValue(child, badKey);
  }
  return object;
}

function lineCounter(text: string): (offset: number) => number {
  const starts = [0];
  for (const end of text.matchAll(/\r\n|\r|\n/gu)) starts.push(end.index + end[0].length);
  return (offset) => {
    let low = 0;
    let high = starts.length;
    while (high - low > 1) {
      const middle = (low + high) >> 1;
      if ((starts[middle] ?? 0) <= offset) low = middle;
      else high = middle;
    }
    return low + 1;
  };
}

function quote(text: string, offset: number, length: number): string {
  const piece = cleanName(text.slice(offset, offset + length), LONGEST_QUOTE);
  return piece === '' ? 'characters that cannot be shown' : piece;
}
