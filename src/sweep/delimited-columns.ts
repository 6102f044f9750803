/** What the columns of a table mean, by their names and the units in them. */

export type ColumnRole = 'frequency' | 'real' | 'imaginary' | 'magnitude' | 'phase';

export type ColumnUnit =
  | 'hz'
  | 'khz'
  | 'mhz'
  | 'ghz'
  | 'linear'
  | 'db'
  | 'return loss'
  | 'vswr'
  | 'degrees'
  | 'radians';

/** One column that means something here. */
export type Column = {
  readonly index: number;
  readonly name: string;
  readonly role: ColumnRole;
  /** Null where the name gives none. */
  readonly unit: ColumnUnit | null;
  /** `s11`, `s21` …; null where the name gives none. */
  readonly parameter: string | null;
};

/** A complex quantity by two columns: real and imaginary, or magnitude and phase. */
export type ComplexColumns = { readonly first: Column; readonly second: Column };

/** Which columns make the sweep of one port. */
export type ColumnChoice = {
  readonly frequency: Column;
  readonly reflection: ComplexColumns;
  readonly transmission: ComplexColumns | null;
  readonly ports: number;
};

/** Why no choice could be made. */
export type ColumnTrouble = { readonly code: string; readonly what: string; readonly mend: string };

const NEEDED = 'frequency_hz with real and imaginary, or with magnitude_db and phase_deg';

/**
 * The columns that can be recognised; others are left out. Words and units may be parted by anything (`Freq. [MHz]`,
 * `S11 Re`, `return_loss_db`, `phaseDeg`).
 */
export function recogniseColumns(names: readonly string[]): readonly Column[] {
  return names.flatMap((name, index) => {
    const { tokens, parameter } = tokensOf(name);
    const role = roleOf(tokens);
    return role === null ? [] : [{ index, name, role, unit: unitOf(role, tokens), parameter }];
  });
}

/**
 * Chooses the columns of one port: real and imaginary before magnitude and phase, the port's own parameter (`s22`
 * for port 2) before an unnamed one.
 */
export function chooseColumns(columns: readonly Column[], port: number): ColumnChoice | ColumnTrouble {
  const frequencies = columns.filter((c) => c.role === 'frequency');
  const [frequency] = frequencies;
  if (!frequency)
    return trouble('no-frequency', 'has no column of frequency', `name the columns, for example ${NEEDED}`);
  if (frequencies.length > 1) return twice(frequencies);
  const ports = Math.max(1, ...columns.flatMap((c) => (c.parameter ?? '').slice(1).split('').map(Number)));
  if (!Number.isInteger(port) || port < 1 || port > ports) {
    const what = `has columns of ${ports === 1 ? 'one port' : `${ports} ports`}, so there is no port ${port}`;
    return {
      code: 'sweep-port',
      what,
      mend: ports === 1 ? 'leave --port away' : `choose a port from 1 to ${ports}`,
    };
  }
  const named = columns.filter((c) => c.parameter === `s${port}${port}`);
  const reflection = choosePair(
    named.length > 0 || port > 1 ? named : columns.filter((c) => c.parameter === null),
  );
  if ('code' in reflection) return reflection;
  const through =
    ports === 2 ? choosePair(columns.filter((c) => c.parameter === `s${3 - port}${port}`)) : null;
  return { frequency, reflection, transmission: through && 'first' in through ? through : null, ports };
}

function choosePair(columns: readonly Column[]): ComplexColumns | ColumnTrouble {
  for (const [firstRole, secondRole] of [
    ['real', 'imaginary'],
    ['magnitude', 'phase'],
  ] as const) {
    const firsts = columns.filter((c) => c.role === firstRole);
    const seconds = columns.filter((c) => c.role === secondRole);
    const [first] = firsts;
    const [second] = seconds;
    if (!first || !second) continue;
    const double = [firsts, seconds].find((same) => same.some((c, i) => i > 0 && c.unit === same[0]?.unit));
    return double ? twice(double) : { first, second };
  }
  if (columns.some((c) => c.role === 'magnitude')) {
    const what = 'has the size of the reflection but not its phase, and without phase there is no distance';
    return trouble('no-phase', what, 'save the sweep as Touchstone, or export real and imaginary parts');
  }
  const found = columns.filter((c) => c.role !== 'frequency').map((c) => `"${c.name}"`);
  const what = `has no pair of columns for the reflection${found.length > 0 ? ` (only ${found.join(', ')})` : ''}`;
  return trouble('no-reflection', what, `name the columns, for example ${NEEDED}`);
}

function twice(columns: readonly Column[]): ColumnTrouble {
  const names = columns.map((c) => `"${c.name}" (column ${c.index + 1})`).join(' and ');
  return trouble(
    'column-twice',
    `has the same quantity twice: ${names}`,
    'keep one of them, or name the port, as in S11 real',
  );
}

function trouble(code: string, what: string, mend: string): ColumnTrouble {
  return { code: `delimited-${code}`, what, mend };
}

const WORDS: Record<ColumnRole, ReadonlySet<string>> = {
  frequency: new Set(['freq', 'frequency', 'f']),
  real: new Set(['re', 'real']),
  imaginary: new Set(['im', 'imag', 'imaginary']),
  magnitude: new Set([
    'mag',
    'magnitude',
    'abs',
    'amplitude',
    'amp',
    'logmag',
    'linmag',
    'vswr',
    'swr',
    'rl',
  ]),
  phase: new Set(['phase', 'ang', 'angle', 'arg']),
};

const FREQUENCY_UNITS = ['hz', 'khz', 'mhz', 'ghz'] as const;

/** Small words of a name, and the parameter in it. */
function tokensOf(name: string): { tokens: ReadonlySet<string>; parameter: string | null } {
  let parameter: string | null = null;
  const words = name
    .slice(0, 200)
    .replace(/\bs[ ]?[([]?[ ]?([1-9])[ ]?[,;]?[ ]?([1-9])[ ]?[)\]]?|s([1-9])([1-9])/gi, (_, a, b, c, d) => {
      parameter ??= `s${a ?? c}${b ?? d}`;
      return ' ';
    })
    .replace(/°/g, ' deg ')
    .replace(/dbm|db|[kmg]?hz/gi, (unit) => ` ${unit.toLowerCase()} `)
    .replace(/([a-z])([A-Z])/g, '$1 $2')
    .toLowerCase();
  return { tokens: new Set(words.split(/[^a-z]+/).filter(Boolean)), parameter };
}

function roleOf(tokens: ReadonlySet<string>): ColumnRole | null {
  if (tokens.has('dbm')) return null;
  for (const role of ['frequency', 'real', 'imaginary', 'magnitude', 'phase'] as const) {
    for (const word of tokens) if (WORDS[role].has(word)) return role;
  }
  if (tokens.has('return') && tokens.has('loss')) return 'magnitude';
  if (tokens.has('db') || tokens.has('lin') || tokens.has('linear')) return 'magnitude';
  if (tokens.has('deg') || tokens.has('rad')) return 'phase';
  return FREQUENCY_UNITS.some((unit) => tokens.has(unit)) ? 'frequency' : null;
}

function unitOf(role: ColumnRole, tokens: ReadonlySet<string>): ColumnUnit | null {
  const has = (...words: readonly string[]) => words.some((word) => tokens.has(word));
  switch (role) {
    case 'frequency':
      return FREQUENCY_UNITS.find((unit) => tokens.has(unit)) ?? null;
    case 'magnitude':
      if (has('vswr', 'swr')) return 'vswr';
      if (has('rl') || (has('return') && has('loss'))) return 'return loss';
      if (has('db', 'log', 'logmag')) return 'db';
      return has('lin', 'linear', 'linmag') ? 'linear' : null;
    case 'phase':
      if (has('deg', 'degree', 'degrees')) return 'degrees';
      return has('rad', 'radian', 'radians') ? 'radians' : null;
    case 'real':
    case 'imaginary':
      return null;
  }
}
