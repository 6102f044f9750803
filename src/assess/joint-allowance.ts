/** What the joints of a line may lose, by the habit of the trade. */
import type { Line } from '../line/line.ts';

/**
 * Joints that the allowance counts: both ends of the line and every one between, but not flanges between guides, whose
 * loss is within that of the guide.
 */
export function jointsWithLoss(line: Line): number {
  const { sections } = line;
  let joints = 0;
  for (let i = 0; i <= sections.length; i++) {
    const before = sections[i - 1] ?? sections[i];
    const after = sections[i] ?? sections[i - 1];
    if (before?.type !== 'guide' || after?.type !== 'guide') joints++;
  }
  return joints;
}

/**
 * Loss allowed for so many joints, one way, dB: 0.05·√f each, f in GHz.
 *
 * @source references.md section 8: mated connectors of the N and 7-16 class (common practice).
 */
export function jointAllowanceDb(joints: number, frequencyHz: number): number {
  return joints * 0.05 * Math.sqrt(frequencyHz / 1e9);
}
