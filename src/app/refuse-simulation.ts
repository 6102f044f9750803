/** What cannot be simulated, and how to ask for it instead. */
import { guideCutoffHz } from '../line/guide.ts';
import { describedLengthM, type GuideSection, type Line, type Section } from '../line/line.ts';
import type { Problem } from '../outcome.ts';
import { type Fault, type FaultPlace, isLump, NORMALISED_FORMS } from './fault-text.ts';
import type { SimulateRequest } from './simulate-request.ts';

/** A sweep that stops below was meant in MHz, Hz. */
const LOWEST_STOP_HZ = 10e3;

/** Everything that is wrong with a request, at once; empty when it can be simulated. */
export function refuse(request: SimulateRequest): Problem[] {
  const { line, range, faults } = request;
  const problems: Problem[] = [];
  const lengthM = describedLengthM(line);
  if (lengthM === null)
    problems.push({
      code: 'simulate-length',
      what: 'the length of the last section is not known',
      mend: 'give its "lengthM" in the line file',
    });
  if (line.end === 'unknown')
    problems.push({
      code: 'simulate-end',
      what: 'the end of the line is not known',
      mend: 'give --end open, short, load or antenna, or "end" in the line file',
    });
  if (!(range.startHz > 0))
    problems.push({
      code: 'simulate-start',
      what: 'a sweep of a lossy line cannot be computed at 0 Hz',
      mend: 'start above 0, for example --sweep 2MHz-2700MHz:1350',
    });
  else if (range.stopHz < LOWEST_STOP_HZ)
    problems.push({
      code: 'simulate-stop',
      what: `the sweep stops at ${range.stopHz} Hz, below all that a line is swept at`,
      mend: 'give the units too, for example --sweep 2MHz-2700MHz:1350',
    });
  problems.push(...refuseGuides(line, range.startHz));
  for (const fault of faults) problems.push(...refuseFault(fault, line, lengthM ?? Number.POSITIVE_INFINITY));
  return problems;
}

function refuseFault(fault: Fault, line: Line, lengthM: number): Problem[] {
  const joints = line.sections.length + 1;
  const outside = (what: string, place: string): Problem => ({
    code: 'fault-place',
    what,
    found: `${fault.kind} … @${place}`,
    mend: Number.isFinite(lengthM)
      ? `the line has ${joints} joints and is ${Number(lengthM.toFixed(2))} m long`
      : `the line has ${joints} joints`,
  });
  if (fault.kind === 'section' || fault.kind === 'wet')
    return fault.toM <= lengthM
      ? refuseStretchInGuide(fault, line)
      : [
          outside(
            `the stretch ends at ${fault.toM} m, beyond the end of the line`,
            `${fault.fromM}m-${fault.toM}m`,
          ),
        ];
  const { place } = fault;
  if (place.at === 'joint' && place.joint > joints)
    return [outside(`there is no joint ${place.joint}`, `joint${place.joint}`)];
  return place.at === 'joint' || place.distanceM <= lengthM
    ? refuseInGuide(fault, sectionOfPlace(line, place))
    : [outside(`${place.distanceM} m is beyond the end of the line`, `${place.distanceM}m`)];
}

function refuseGuides(line: Line, startHz: number): Problem[] {
  const guides = line.sections.filter((section): section is GuideSection => section.type === 'guide');
  const problems: Problem[] = [];
  const narrowest = guides.reduce<GuideSection | null>(
    (least, section) => (least === null || section.guide.aMm < least.guide.aMm ? section : least),
    null,
  );
  if (narrowest !== null && startHz > 0 && startHz <= guideCutoffHz(narrowest.guide)) {
    const { guide } = narrowest;
    const [lowMHz, highMHz] = guide.bandMHz ?? [1.25, 1.9].map((x) => roundMHz(x * guideCutoffHz(guide)));
    problems.push({
      code: 'simulate-cutoff',
      what: `nothing travels in ${guide.name} at or below its cut-off, ${roundMHz(guideCutoffHz(guide))} MHz`,
      mend: `start above it, for example --sweep ${lowMHz}MHz-${highMHz}MHz:801`,
    });
  }
  if (line.end === 'open' && line.sections.at(-1)?.type === 'guide')
    problems.push({
      code: 'simulate-end',
      what: 'the open end of a guide radiates most of the wave and is no full reflection',
      mend: 'give --end short, load or antenna',
    });
  return problems;
}

function refuseStretchInGuide(fault: Extract<Fault, { kind: 'section' | 'wet' }>, line: Line): Problem[] {
  let startM = 0;
  for (const section of line.sections) {
    const endM = startM + (section.lengthM ?? 0);
    if (section.type === 'guide' && fault.fromM < endM && fault.toM > startM)
      return [
        {
          code: 'fault-guide',
          what: `a stretch of the kind "${fault.kind}" is a cable's; from ${startM} m to ${endM} m there is a guide`,
          mend: `put a lumped fault into the guide, like ${NORMALISED_FORMS['shunt-capacitance']}`,
        },
      ];
    startM = endM;
  }
  return [];
}

function refuseInGuide(fault: Exclude<Fault, { kind: 'section' | 'wet' }>, section: Section): Problem[] {
  if (section.type !== 'guide' || 'normalised' in fault || fault.kind === 'short') return [];
  if (isLump(fault))
    return [
      {
        code: 'fault-guide',
        what: `${fault.kind.replace('-', ' ')} in a guide has no unit: it is relative to the guide's own impedance`,
        mend: `write it like ${NORMALISED_FORMS[fault.kind]}`,
      },
    ];
  return [
    {
      code: 'fault-guide',
      what: 'an open guide radiates most of the wave and is no full reflection',
      mend: 'give a short, or a lumped fault like series-inductance:x2@joint3',
    },
  ];
}

/** Section that a lump at this place sits in; at a joint, the one before it. */
function sectionOfPlace(line: Line, place: FaultPlace): Section {
  const last = line.sections.length - 1;
  let index = 0;
  if (place.at === 'joint') index = Math.max(0, place.joint - 2);
  else
    for (let endM = line.sections[0]!.lengthM ?? 0; index < last && place.distanceM > endM + SAME_PLACE_M; )
      endM += line.sections[++index]!.lengthM ?? 0;
  return line.sections[index]!;
}

/** Places that are the same but for rounding, m. */
const SAME_PLACE_M = 1e-9;

function roundMHz(frequencyHz: number): number {
  return Math.round(frequencyHz / 1e5) / 10;
}
