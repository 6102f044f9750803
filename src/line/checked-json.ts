/** From JSON text to checked values: every problem of the file at once, in words, with its line. */
import * as v from 'valibot';
import { fail, type Outcome, type Problem, succeed } from '../outcome.ts';
import { cleanName } from './clean-name.ts';
import { type JsonPath, type JsonText, parseJsonText } from './json-text.ts';
import { nearestWords, orList } from './nearest-word.ts';

/** How a kind of file speaks of its own keys. */
export type FileWords = {
  /** What each key should hold, continues "write …"; `parent.key` goes before `key`, `key[]` is an item of a list. */
  readonly hints: Readonly<Record<string, string>>;
  /** One item of each list: "section" for `sections`. */
  readonly items: Readonly<Record<string, string>>;
};

/** Problems that one answer lists; a file that is wrong everywhere is wrong in the same way. */
const MOST_PROBLEMS = 50;

/**
 * Reads text as JSON and checks it against a schema.
 *
 * @param file Name for the problems.
 * @param words How to speak of the file's keys.
 * @returns What the schema gives, or every problem found, in the order of the file's lines.
 */
export function readCheckedJson<Schema extends v.GenericSchema>(
  text: string,
  file: string,
  schema: Schema,
  words: FileWords,
): Outcome<v.InferOutput<Schema>> {
  const json = parseJsonText(text, file);
  if (!json.ok) return json;
  const checked = v.safeParse(schema, json.value.value);
  const problems = [
    ...json.value.problems,
    ...(checked.issues ?? []).map((issue) => problemOf(issue, json.value, file, words)),
  ].sort((a, b) => (a.line ?? 0) - (b.line ?? 0));
  if (problems.length > MOST_PROBLEMS) {
    const more = problems.length - MOST_PROBLEMS;
    return fail(...problems.slice(0, MOST_PROBLEMS), {
      code: 'more-problems',
      file,
      what: `and ${more} more problem${more === 1 ? '' : 's'}`,
      mend: 'mend the ones above first',
    });
  }
  if (!checked.success || problems.length > 0) return fail(...problems);
  return succeed(checked.output);
}

/** An object with these keys and no others; a key it does not know becomes a problem that names the nearest. */
export function closedObject<const Entries extends v.ObjectEntries>(entries: Entries) {
  return v.pipe(
    // The library takes a list for an object too.
    v.custom<Record<string, unknown>>(isObject),
    v.objectWithRest(entries, v.never(Object.keys(entries).join(' '))),
  );
}

/** A finite number within bounds, both included. */
export function numberWithin(low: number, high: number) {
  return v.pipe(v.number(), v.minValue(low), v.maxValue(high));
}

/** A finite number above `low`, at most `high`. */
export function numberAbove(low: number, high: number) {
  return v.pipe(v.number(), v.gtValue(low), v.maxValue(high));
}

/** A text that still says something once it is cleaned; gives the cleaned text. */
export function visibleText(longest?: number) {
  return v.pipe(
    v.string(),
    v.transform((text) => cleanName(text, longest)),
    v.check(
      (text) => text !== '',
      advice('empty-text', 'holds nothing that can be shown', 'write a few letters'),
    ),
  );
}

/** One of a few words; another becomes a problem that names the nearest. */
export function oneOf<const Words extends readonly string[]>(words: Words) {
  return v.picklist(words, (issue) => {
    const near = typeof issue.input === 'string' ? nearestWords(issue.input, words) : [];
    const meant = near.length > 0 ? `did you mean ${orList(near)}? ` : '';
    return advice('unknown-word', 'is not one of the words known here', `${meant}use ${orList(words)}`);
  });
}

/**
 * Message of a check of one's own, in the form that becomes a problem.
 *
 * @param what Follows the path: "section 2, lengthM …"; cleaned of what came from the file.
 * @param mend How to mend it.
 */
export function advice(code: string, what: string, mend: string): string {
  return [code, what, mend].join('\n');
}

/** Refuses an object that gives the same thing twice, once under each key. */
export function notBoth<Given extends object>(first: string, second: string) {
  return v.rawCheck<Given>(({ dataset, addIssue }) => {
    const object: unknown = dataset.value;
    if (!has(object, first) || !has(object, second)) return;
    addIssue({
      message: advice(
        'given-twice',
        `stands beside ${first}, which says the same thing`,
        'keep one of the two',
      ),
      path: [{ type: 'object', origin: 'value', input: object, key: second, value: object[second] }],
    });
  });
}

/** True for a value that has keys, this one among them with a value. */
export function has(value: unknown, key: string): value is Record<string, unknown> {
  return isObject(value) && value[key] !== undefined;
}

/** True for a value with keys. */
export function isObject(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

function problemOf(issue: v.BaseIssue<unknown>, json: JsonText, file: string, words: FileWords): Problem {
  const path: JsonPath = (issue.path ?? []).map((item) =>
    typeof item.key === 'number' ? item.key : String(item.key),
  );
  const where = pathInWords(path, words);
  const [key = '', parent = ''] = path.filter((step) => typeof step === 'string').reverse();
  const item = typeof path.at(-1) === 'number' ? words.hints[`${key}[]`] : undefined;
  const hint = item ?? words.hints[`${parent}.${key}`] ?? words.hints[key] ?? 'a value of the right kind';
  const here = { file, line: json.lineOf(path) };

  if (issue.type === 'never') return unknownKey(issue, path, where, json, file);
  if (issue.path?.at(-1)?.origin === 'key') {
    const what = `${where} is missing`;
    return {
      ...here,
      line: json.lineOf(path.slice(0, -1)),
      code: 'missing-key',
      what,
      mend: `write "${key}": ${hint}`,
    };
  }
  const found = json.written(path);
  switch (issue.type) {
    case 'min_value':
    case 'max_value':
    case 'gt_value':
      return {
        ...here,
        code: 'out-of-range',
        what: `${where} is out of range`,
        found,
        mend: `write ${hint}`,
      };
    case 'min_length':
    case 'max_length':
      return {
        ...here,
        code: 'list-length',
        what: `${where} has too few or too many entries`,
        found,
        mend: `write ${hint}`,
      };
    case 'check':
    case 'raw_check':
    case 'raw_transform':
    case 'picklist':
    case 'custom': {
      const [code = '', what = '', mend] = issue.message.split('\n');
      if (mend !== undefined) return { ...here, code, what: `${where} ${what}`, found, mend };
      break;
    }
  }
  return { ...here, code: 'wrong-type', what: `${where} is of the wrong kind`, found, mend: `write ${hint}` };
}

function unknownKey(
  issue: v.BaseIssue<unknown>,
  path: JsonPath,
  where: string,
  json: JsonText,
  file: string,
): Problem {
  const known = issue.message.split(' ');
  const around = issue.path?.at(-1)?.input;
  const [near] = nearestWords(
    String(path.at(-1)),
    known.filter((key) => !has(around, key)),
  );
  return {
    code: 'unknown-key',
    file,
    line: json.lineOfKey(path),
    what: `${where} is not a key that is known here`,
    found: cleanName(`"${path.at(-1)}"`),
    mend: near === undefined ? `remove it; the keys here are ${known.join(', ')}` : `did you mean "${near}"?`,
  };
}

/** "section 2, jointAfter, returnLossDb". */
function pathInWords(path: JsonPath, words: FileWords): string {
  const parts: string[] = [];
  for (let i = 0; i < path.length; i++) {
    const step = path[i];
    const next = path[i + 1];
    if (typeof step === 'string' && typeof next === 'number') {
      const item = words.items[step];
      parts.push(item === undefined ? `${cleanName(step)}, item ${next + 1}` : `${item} ${next + 1}`);
      i++;
    } else {
      parts.push(typeof step === 'number' ? `item ${step + 1}` : cleanName(String(step)));
    }
  }
  return parts.length === 0 ? 'the file as a whole' : parts.join(', ');
}
