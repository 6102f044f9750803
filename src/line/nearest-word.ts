/** The word someone probably meant. */
import { distance } from 'fastest-levenshtein';

/** Longest word that is compared; longer ones mean nothing close. */
const LONGEST = 60;

/**
 * Finds known words close to one that is not known: the same letters in other case or order, one that starts or
 * ends like it, or one that few letters tell apart.
 *
 * @param known Words to choose from.
 * @param count At most so many.
 * @returns Closest first; empty when nothing is close enough to be worth naming.
 */
export function nearestWords(word: string, known: readonly string[], count = 1): readonly string[] {
  const wanted = word.toLowerCase();
  if (wanted === '' || wanted.length > LONGEST) return [];
  const scored: { word: string; score: number }[] = [];
  for (const candidate of known) {
    const other = candidate.toLowerCase();
    // Two letters swapped are one slip of the hand, though two edits.
    const edits =
      sorted(wanted) === sorted(other) ? Math.min(1, distance(wanted, other)) : distance(wanted, other);
    const short = Math.min(wanted.length, other.length);
    const alike =
      edits <= Math.max(1, Math.floor(Math.max(wanted.length, other.length) / 3)) && edits < wanted.length;
    const contained = short >= 2 && (other.includes(wanted) || wanted.includes(other));
    if (alike) scored.push({ word: candidate, score: edits });
    else if (contained) scored.push({ word: candidate, score: LONGEST + edits });
  }
  // A stable sort keeps the order of the list between equals.
  scored.sort((a, b) => a.score - b.score);
  return scored.slice(0, count).map((one) => one.word);
}

function sorted(word: string): string {
  return Array.from(word).sort().join('');
}

/** Says words as a choice: "a", "a" or "b", "a", "b" or "c". */
export function orList(words: readonly string[]): string {
  const quoted = words.map((word) => `"${word}"`);
  const last = quoted.pop() ?? '';
  return quoted.length === 0 ? last : `${quoted.join(', ')} or ${last}`;
}
