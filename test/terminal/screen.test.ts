import { describe, expect, it } from 'vitest';
import { createScreen, sizeOf } from '../../src/terminal/screen.ts';

function makeTerminal(columns = 20, rows = 5) {
  const written: string[] = [];
  const terminal = {
    columns,
    rows,
    write: (text: string): boolean => {
      written.push(text);
      return true;
    },
  };
  return { terminal, written, take: () => written.splice(0).join('') };
}

describe('createScreen', () => {
  it('writes nothing before it is entered, and restores everything when it is left', () => {
    const { terminal, take } = makeTerminal();
    const screen = createScreen(terminal);
    screen.stream.write('a frame');
    screen.leave();
    expect(take()).toBe('');
    screen.enter();
    screen.enter();
    expect(take()).toBe('\u001b[?1049h\u001b[?7l\u001b[?25l\u001b[0m\u001b[2J\u001b[H');
    screen.leave();
    screen.leave();
    expect(take()).toBe('\u001b[?2026l\u001b[0m\u001b[?7h\u001b[?25h\u001b[?1049l');
  });

  it('writes only rows that changed, each at its place', () => {
    const { terminal, take } = makeTerminal();
    const screen = createScreen(terminal);
    screen.enter();
    screen.stream.write('one\ntwo\nthree');
    take();
    screen.stream.write('one\ntwo!\nthree');
    expect(take()).toBe('\u001b[?2026h\u001b[2;1Htwo!\u001b[0m\u001b[K\u001b[?2026l');
    screen.stream.write('one\ntwo!\nthree');
    expect(take()).toBe('');
    screen.stream.write('one');
    expect(take()).toContain('\u001b[3;1H\u001b[0m\u001b[K');
  });

  it('does not erase behind a full row, nor write below the terminal', () => {
    const { terminal, take } = makeTerminal(3, 2);
    const screen = createScreen(terminal);
    screen.enter();
    take();
    screen.stream.write('abc\nde\nlost');
    const text = take();
    expect(text).toContain('\u001b[1;1Habc\u001b[0m\u001b[2;1Hde\u001b[0m\u001b[K');
    expect(text).not.toContain('lost');
  });

  it('paints the latest frame whole after it was forgotten, once', () => {
    const { terminal, take } = makeTerminal();
    const screen = createScreen(terminal);
    screen.enter();
    screen.stream.write('same');
    take();
    screen.forget();
    screen.restore();
    screen.restore();
    expect(take()).toBe(
      '\u001b[0m\u001b[2J\u001b[H\u001b[?2026h\u001b[1;1Hsame\u001b[0m\u001b[K\u001b[?2026l',
    );
  });

  it("leaves the library's own cursor commands out, and survives a terminal that is gone", () => {
    const { terminal, take } = makeTerminal();
    const screen = createScreen(terminal);
    screen.enter();
    take();
    screen.stream.write('\u001b[?25l');
    expect(take()).toBe('');
    terminal.write = () => {
      throw new Error('EIO');
    };
    screen.stream.write('gone');
    screen.leave();
    expect(take()).toBe('');
  });

  it('has the size of the terminal at every moment; 80 × 24 where there is none', () => {
    const { terminal } = makeTerminal();
    const { stream } = createScreen(terminal);
    terminal.columns = 132;
    expect([stream.columns, stream.rows]).toEqual([132, 5]);
    expect(sizeOf({ write: () => true })).toEqual({ columns: 80, rows: 24 });
  });
});
