// Makes the sample sweeps from their line files with the built program: `npm run samples`.
// Every sweep is invented. Its header holds the command that makes it again, byte for byte.
import { execFileSync } from 'node:child_process';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const folder = dirname(fileURLToPath(import.meta.url));
const program = join(folder, '..', 'dist', 'cli.js');

const field = ['--noise', '-70', '--residue', '-42'];
const samples = [
  // The same line twice, as built from one seed: first sound, then years later with a corroded joint.
  { name: 'north-1', built: 11, seed: 101, faults: [] },
  { name: 'north-1-later', built: 11, seed: 102, faults: ['series-resistance:9ohm@joint3'] },
  {
    name: 'north-2',
    built: 12,
    seed: 103,
    faults: ['shunt-capacitance:0.6pF@31.4m'],
    sweep: '1700MHz-2200MHz:1001',
  },
  { name: 'south-1', built: 13, seed: 104, faults: [] },
  { name: 'south-2', built: 14, seed: 105, faults: ['wet:k2x20,er1.06@41m-44m'] },
  { name: 'south-3', built: 15, seed: 106, faults: ['open@17.4m'] },
  {
    name: 'link-1',
    built: 20,
    seed: 107,
    faults: ['series-inductance:x0.15@joint4'],
    sweep: '5900MHz-7900MHz:801',
  },
];

for (const { name, built, seed, faults, sweep } of samples) {
  const flags = [
    ...faults.flatMap((fault) => ['--fault', fault]),
    ...(sweep ? ['--sweep', sweep] : []),
    ...['--as-built', String(built), '--seed', String(seed)],
    ...field,
  ];
  const args = ['simulate', `${name}.line.json`, ...flags, '-o', `${name}.s1p`, '--force'];
  execFileSync(process.execPath, [program, ...args], { cwd: folder, stdio: 'inherit' });
}
