/**
 * The terminal as a sheet of rows: other buffer in and out, and only changed rows written.
 *
 * The UI library hands over each frame whole (its `debug` way of writing); this compares it with what stands there
 * and addresses rows by number. So a frame can be painted anew after a resize or a suspension, nothing ever scrolls,
 * and a frame costs few bytes over a slow line.
 */
import { Writable } from 'node:stream';
import { cellWidth } from '../plot/cells.ts';

const ENTER = '\u001b[?1049h\u001b[?7l\u001b[?25l\u001b[0m\u001b[2J\u001b[H';
const LEAVE = '\u001b[?2026l\u001b[0m\u001b[?7h\u001b[?25h\u001b[?1049l';
const CLEAR = '\u001b[0m\u001b[2J\u001b[H';
const BEGIN_UPDATE = '\u001b[?2026h';
const END_UPDATE = '\u001b[?2026l';
const ERASE_REST = '\u001b[K';

/** What the UI library writes besides frames: showing and hiding the cursor, which is ours to do. */
const CURSOR_MODE = /^\u001b\[\?\d+[hl]$/;

export type Screen = {
  /** What the UI library draws on. */
  readonly stream: NodeJS.WriteStream;
  /** Takes the terminal over. */
  readonly enter: () => void;
  /** Gives it back as it was; may be called at any time, any number of times. */
  readonly leave: () => void;
  /** Clears, and paints the next frame whole; takes over the terminal's present size. */
  readonly forget: () => void;
  /** Paints the latest frame whole if a `forget` is still unanswered. */
  readonly restore: () => void;
};

/** Where rows are really written. */
export type Terminal = {
  readonly columns?: number;
  readonly rows?: number;
  write(text: string): boolean;
};

/** Columns and rows of a terminal; 80 × 24 when it does not say. */
export function sizeOf(terminal: Terminal): { readonly columns: number; readonly rows: number } {
  return { columns: terminal.columns || 80, rows: terminal.rows || 24 };
}

/** Builds a screen on a terminal; nothing is written before `enter`. */
export function createScreen(terminal: Terminal): Screen {
  let inside = false;
  let shown: readonly string[] | null = null;
  let latest: readonly string[] = [];

  const paint = (lines: readonly string[]): void => {
    latest = lines;
    if (!inside) return;
    const { columns, rows } = sizeOf(terminal);
    let changes = '';
    for (let i = 0; i < Math.min(rows, Math.max(lines.length, shown?.length ?? 0)); i++) {
      const line = lines[i] ?? '';
      if (shown && line === (shown[i] ?? '')) continue;
      // Erasing after a full row would take its last character with it.
      const erase = cellWidth(line) < columns ? ERASE_REST : '';
      changes += `\u001b[${i + 1};1H${line}\u001b[0m${erase}`;
    }
    shown = lines;
    if (changes !== '') put(`${BEGIN_UPDATE}${changes}${END_UPDATE}`);
  };

  const put = (text: string): void => {
    try {
      terminal.write(text);
    } catch {
      // The terminal is gone; whoever listens to it ends the program.
      inside = false;
    }
  };

  const stream = new Writable({
    decodeStrings: false,
    write(chunk: unknown, _encoding, done) {
      const text = String(chunk);
      if (text !== '' && !CURSOR_MODE.test(text)) paint(text.split('\n'));
      done();
    },
  });
  Object.defineProperties(stream, {
    columns: { get: () => sizeOf(terminal).columns },
    rows: { get: () => sizeOf(terminal).rows },
    isTTY: { value: true },
  });

  return {
    // The library uses of a terminal stream only what is defined here.
    stream: stream as unknown as NodeJS.WriteStream,
    enter: () => {
      if (inside) return;
      inside = true;
      shown = null;
      put(ENTER);
    },
    leave: () => {
      if (!inside) return;
      put(LEAVE);
      inside = false;
    },
    forget: () => {
      shown = null;
      if (inside) put(CLEAR);
    },
    restore: () => {
      if (shown === null) paint(latest);
    },
  };
}
