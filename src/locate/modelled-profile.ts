/** Ohms against distance as the solver sees the line, where the sweep itself does not give them. */
import type { Line } from '../line/line.ts';
import { sectionMedium } from '../line/medium.ts';
import type { ImpedanceProfile } from './impedance-profile.ts';
import type { Solution } from './solution.ts';

/**
 * The impedance profile drawn from the solved line, for a sweep that does not reach down to 0 Hz: the described
 * impedance of each section and the steps that the solver found, and nothing else.
 *
 * @param options.portOhm Reference of the sweep, for what a device's impedance is counted from.
 */
export function modelledProfile(options: {
  readonly line: Line;
  readonly solution: Pick<Solution, 'echoes' | 'lengthM'>;
  readonly portOhm: number;
}): ImpedanceProfile {
  const { line, solution, portOhm } = options;
  const stretches = [...describedStretches(line, solution, portOhm), ...foundSteps(solution)].sort(
    (a, b) => a.fromM - b.fromM,
  );
  const distanceM: number[] = [];
  const impedanceOhm: number[] = [];
  stretches.forEach(({ fromM, ohm }, i) => {
    const toM = Math.min(stretches[i + 1]?.fromM ?? solution.lengthM, solution.lengthM);
    if (toM < fromM) return;
    distanceM.push(fromM, toM);
    impedanceOhm.push(ohm, ohm);
  });
  return {
    distanceM: Float64Array.from(distanceM),
    impedanceOhm: Float64Array.from(impedanceOhm),
    origin: 'modelled',
  };
}

/** From here on the line has this impedance. */
type ImpedanceFrom = { readonly fromM: number; readonly ohm: number };

/** Sections begin where their joint was found, else where the description puts it. */
function describedStretches(
  line: Line,
  solution: Pick<Solution, 'echoes' | 'lengthM'>,
  portOhm: number,
): ImpedanceFrom[] {
  let describedM = 0;
  return line.sections.map((section, i) => {
    const found = solution.echoes.find((echo) => echo.joint?.index === i + 1);
    const fromM = i === 0 ? 0 : (found?.distanceM ?? describedM);
    describedM += section.lengthM ?? 0;
    const { impedance, z0Ohm } = sectionMedium(section, Float64Array.of(1e9), {
      temperatureC: line.temperatureC,
      z0Ohm: portOhm,
    });
    return { fromM, ohm: section.type === 'device' ? impedance.re[0]! : z0Ohm };
  });
}

function foundSteps(solution: Pick<Solution, 'echoes'>): ImpedanceFrom[] {
  return solution.echoes.flatMap((echo) =>
    echo.kind === 'impedance-step' && echo.value?.quantity === 'impedance' && echo.joint === null
      ? [{ fromM: echo.distanceM, ohm: echo.value.value }]
      : [],
  );
}
