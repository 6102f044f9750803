/**
 * What people must be told before they connect anything, and before they act on a result.
 *
 * @source Common practice, and the rules named: OET Bulletin 65 (1997) and ICNIRP 2020 (exposure), 29 CFR 1926
 *   Subpart M and TIA-222 (work at height), IEC 62305 (lightning); from memory where they are paraphrased.
 */

export type Cautions = {
  /** The gist in one line of at most 80 columns. */
  readonly short: string;
  /** The whole text, a paragraph each. */
  readonly paragraphs: readonly string[];
};

export const CAUTIONS: Cautions = {
  short: 'No transmitter on the line, no DC, no thunder; confirm a place before you cut.',
  paragraphs: [
    'Before you connect: see to it that no transmitter can be keyed on this line, and know which ones stand nearby. ' +
      'Power that comes down the line can hurt people and destroy the instrument.',
    'Look for DC on the line (amplifier supply, bias tee, remote tilt). Take it off or fit a block, and discharge ' +
      'the cable first: a long open run holds a static charge.',
    'A sweep into a connected antenna radiates. Do it only where a licence or rule allows it, at the lowest level ' +
      'that serves, and keep off frequencies that safety services use.',
    'Leave masts and antenna lines alone when thunder is about. Arrestors and bonds stay in place; one that is taken ' +
      'out for a test is put back at once.',
    'Climbing is for trained people with fall protection, a second person and a rescue plan.',
    'Exposure limits and climbing rules differ from country to country. Local law, the site owner and the licence ' +
      'come first; this program knows none of them.',
    'Distances and losses are estimates that rest on the described line, its velocity factor and its loss. Confirm a ' +
      'place before cutting or digging.',
  ],
};
