/** The way into the workspace and out of it; what it shows is the matter of test/terminal. */
import { describe, expect, it } from 'vitest';
import { runCli } from './run-cli.ts';
import { runInTerminal } from './run-in-terminal.ts';

const ENTER_SCREEN = '\u001b[?1049h';
const LEAVE_SCREEN = '\u001b[?1049l';
/** A trace is on the screen. */
const DRAWN = /[\u2801-\u28ff]/u;

describe('feedsonde', () => {
  it('opens the workspace on the bundled sample, and gives the terminal back with status 0', async () => {
    const { output, status } = await runInTerminal([], {}, { seen: DRAWN, keys: 'q' });
    expect(output).toContain('Ansel Ridge north 1');
    expect(output.indexOf(ENTER_SCREEN)).toBeGreaterThanOrEqual(0);
    expect(output.lastIndexOf(LEAVE_SCREEN)).toBeGreaterThan(output.lastIndexOf(ENTER_SCREEN));
    // A fault is on the screen, and judging it is not the workspace's matter.
    expect(status).toBe(0);
  });

  it('opens the sweep that is named', async () => {
    const args = ['samples/south-3.s1p', '--units', 'ft'];
    const { output } = await runInTerminal(args, {}, { seen: DRAWN, keys: 'q' });
    expect(output).toContain('Ansel Ridge south 3');
  });

  it('gives the terminal back when it is ended from outside', async () => {
    const { output } = await runInTerminal([], {}, { seen: DRAWN, signal: 'SIGTERM' });
    expect(output.lastIndexOf(LEAVE_SCREEN)).toBeGreaterThan(output.lastIndexOf(ENTER_SCREEN));
  });

  it('says what is wrong with its input before it takes the screen', async () => {
    const { output, status } = await runInTerminal(['none.s1p', '--cable', 'rg-213']);
    expect(output).toContain('feedsonde: none.s1p: there is no such file');
    expect(output).not.toContain(ENTER_SCREEN);
    expect(status).toBe(2);
  });

  it('prints the same as locate, with status 0, where standard output is a pipe', async () => {
    const printed = await runCli(['samples/south-3.s1p']);
    const located = await runCli(['locate', 'samples/south-3.s1p']);
    expect(printed).toEqual({ ...located, status: 0 });
  });
});
