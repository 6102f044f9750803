/**
 * The one door to SQLite: the runtime's own `node:sqlite` where it has one, else better-sqlite3, which is an optional
 * dependency and may be missing. Both look the same from outside, their errors too.
 */
import { createRequire } from 'node:module';

export type DriverName = 'node:sqlite' | 'better-sqlite3';

export type SqlValue = null | number | string | Uint8Array;

export type Row = Readonly<Record<string, SqlValue>>;

/** An open database. Every call is synchronous and throws what SQLite says; `sqlFault` reads it. */
export type Database = {
  readonly driver: DriverName;
  /** Runs statements that take no values and give no rows. */
  exec(sql: string): void;
  all(sql: string, ...values: readonly SqlValue[]): readonly Row[];
  get(sql: string, ...values: readonly SqlValue[]): Row | undefined;
  run(sql: string, ...values: readonly SqlValue[]): void;
  close(): void;
};

export type Driver = { readonly name: DriverName; open(path: string): Database };

/** What both libraries have in common. */
type Statement = {
  all(...values: readonly SqlValue[]): unknown[];
  get(...values: readonly SqlValue[]): unknown;
  run(...values: readonly SqlValue[]): unknown;
};
type Connection = { exec(sql: string): unknown; prepare(sql: string): Statement; close(): unknown };
type ConnectionClass = new (path: string) => Connection;

/** The SQLite of this installation; null where there is none. */
export function findDriver(): Driver | null {
  const builtIn = builtInClass();
  if (builtIn) return driverOf('node:sqlite', builtIn);
  const installed = installedClass();
  return installed && driverOf('better-sqlite3', installed);
}

/** Node has it from 22.13 on without a flag. It announces itself on standard error, where only problems belong. */
function builtInClass(): ConnectionClass | null {
  const runtime: { getBuiltinModule?: (name: string) => unknown } = process;
  const { emitWarning } = process;
  try {
    process.emitWarning = () => {};
    const found = runtime.getBuiltinModule?.('node:sqlite') as { DatabaseSync?: ConnectionClass } | undefined;
    return found?.DatabaseSync ?? null;
  } catch {
    return null;
  } finally {
    process.emitWarning = emitWarning;
  }
}

/** The package may be missing, or built for another Node; the second shows only when it opens something. */
function installedClass(): ConnectionClass | null {
  try {
    const found = createRequire(import.meta.url)('better-sqlite3') as ConnectionClass;
    new found(':memory:').close();
    return found;
  } catch {
    return null;
  }
}

function driverOf(name: DriverName, Connection: ConnectionClass): Driver {
  return {
    name,
    open(path) {
      const connection = new Connection(path);
      const statements = new Map<string, Statement>();
      const prepared = (sql: string): Statement => {
        const known = statements.get(sql);
        if (known) return known;
        const statement = connection.prepare(sql);
        statements.set(sql, statement);
        return statement;
      };
      return {
        driver: name,
        exec: (sql) => void connection.exec(sql),
        all: (sql, ...values) => prepared(sql).all(...values) as Row[],
        get: (sql, ...values) => prepared(sql).get(...values) as Row | undefined,
        run: (sql, ...values) => void prepared(sql).run(...values),
        close: () => void connection.close(),
      };
    },
  };
}

/** What went wrong in SQLite, as far as anyone can act on it. */
export type SqlFault = 'busy' | 'read-only' | 'disk' | 'corrupt' | 'full' | 'cannot-open' | 'no-database';

/** Primary result codes. @source sqlite.org, "Result and Error Codes". */
const FAULT_OF_CODE: Readonly<Record<number, SqlFault>> = {
  5: 'busy',
  6: 'busy',
  8: 'read-only',
  10: 'disk',
  11: 'corrupt',
  13: 'full',
  14: 'cannot-open',
  26: 'no-database',
};
const FAULT_OF_WORD: Readonly<Record<string, SqlFault>> = {
  BUSY: 'busy',
  LOCKED: 'busy',
  READONLY: 'read-only',
  IOERR: 'disk',
  CORRUPT: 'corrupt',
  FULL: 'full',
  CANTOPEN: 'cannot-open',
  NOTADB: 'no-database',
};

/** Reads an error of either library; null for anything that SQLite did not say, or that is a bug of ours. */
export function sqlFault(error: unknown): SqlFault | null {
  if (!(error instanceof Error) || !('code' in error)) return null;
  if (error.code === 'ERR_SQLITE_ERROR' && 'errcode' in error)
    return FAULT_OF_CODE[Number(error.errcode) & 0xff] ?? null;
  const word = /^SQLITE_([A-Z]+)/u.exec(String(error.code))?.[1] ?? '';
  return FAULT_OF_WORD[word] ?? null;
}
