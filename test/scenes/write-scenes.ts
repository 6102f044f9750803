/**
 * Writes scenes as files to look at: `npx tsx test/scenes/write-scenes.ts --suite single --seed 1 --count 5 -o DIR`.
 *
 * Each scene becomes NAME.s1p, NAME.line.json and NAME.truth.json.
 */
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { parseArgs } from 'node:util';
import { drawScene, SUITE_NAMES } from './suites.ts';

const { values } = parseArgs({
  options: {
    suite: { type: 'string', default: 'single' },
    seed: { type: 'string', default: '1' },
    count: { type: 'string', default: '5' },
    output: { type: 'string', short: 'o', default: 'scenes' },
    ripple: { type: 'string', default: 'worst' },
  },
});
const suite = SUITE_NAMES.find((name) => name === values.suite);
if (suite === undefined) {
  console.error(`no suite "${values.suite}"; there are ${SUITE_NAMES.join(', ')}`);
  process.exit(2);
}
mkdirSync(values.output, { recursive: true });
for (let index = 0; index < Number(values.count); index++) {
  const rippleMeasure = values.ripple === 'rms' ? 'rms' : 'worst';
  const scene = drawScene(suite, Number(values.seed), index, { rippleMeasure });
  const stem = join(values.output, `${suite}-${values.seed}-${index}`);
  writeFileSync(`${stem}.s1p`, scene.sweepText);
  writeFileSync(`${stem}.line.json`, scene.lineText);
  writeFileSync(`${stem}.truth.json`, `${JSON.stringify(scene.truth, null, 2)}\n`);
  console.log(
    `${stem}: ${scene.truth.plan}, ${scene.truth.points} points, ${scene.truth.lengthM.toFixed(2)} m`,
  );
}
