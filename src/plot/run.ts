/** Text with a meaning: what every picture is made of before a theme gives it colour. */

/** What a stretch of text stands for. A theme turns roles into colours; the words and glyphs carry the meaning. */
export type Role =
  | 'plain'
  | 'dim'
  | 'strong'
  | 'chosen'
  | 'key'
  | 'axis'
  | 'line'
  | 'trace'
  | 'ohms'
  | 'baseline'
  | 'tried'
  | 'difference'
  | 'doubt'
  | 'guide'
  | 'cursor'
  | 'fault'
  | 'watch'
  | 'sound'
  | 'caution';

/** A stretch of text in one role. */
export type Run = { readonly text: string; readonly role: Role };

/** Shorthand for a run. */
export function run(text: string, role: Role = 'plain'): Run {
  return { text, role };
}

/** The text of a row of runs, roles left out. */
export function runsText(runs: readonly Run[]): string {
  return runs.map((r) => r.text).join('');
}

/** Joins neighbours of the same role and drops empty runs. */
export function mergeRuns(runs: readonly Run[]): readonly Run[] {
  const merged: Run[] = [];
  for (const next of runs) {
    if (next.text === '') continue;
    const last = merged.at(-1);
    if (last && last.role === next.role)
      merged[merged.length - 1] = { text: last.text + next.text, role: last.role };
    else merged.push(next);
  }
  return merged;
}
