import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterEach, describe, expect, it } from 'vitest';
import { runInTerminal, type TerminalRun } from './terminal-run.ts';

/** Keeps the settings of the terminal and runs the workspace. */
const FOREGROUND = 'before=$(stty -g); "$NODE" "$PROGRAM" samples/north-1-later.s1p';
/** Shows its status, and whether the settings are as they were. */
const AFTER = '; echo "status $?"; [ "$before" = "$(stty -g)" ] && echo "settings kept"; sleep 30';

const FOUND = /series resistance [89]\.\d Ω/;

let run: TerminalRun | null = null;
afterEach(() => run?.stop());

async function expectRestored(opened: TerminalRun, status: number): Promise<void> {
  await opened.until(new RegExp(`status ${status}`));
  await opened.until(/settings kept/);
  expect(opened.isFullScreen()).toBe(false);
  expect(opened.cursorIsHidden()).toBe(false);
}

describe('the built workspace in a terminal', () => {
  it('shows the line and what is wrong with it, answers keys, and gives the terminal back when quit', async () => {
    run = runInTerminal(`echo prompt; ${FOREGROUND}${AFTER}`);
    await run.until(/Ansel Ridge north 1/);
    await run.until(FOUND);
    expect(run.isFullScreen()).toBe(true);
    expect(run.cursorIsHidden()).toBe(true);
    expect(run.rows().at(-1)).toBe('');
    await run.until(/main run 46\.0 m.*antenna/);
    run.type('?');
    await run.until(/back to the shell for a while/);
    run.type('\u001b');
    await run.until(/\[1 trace\]/);
    run.type('u');
    await run.until(/\d ft ±\d/);
    run.type('2');
    await run.until(/\[2 ohms\]/);
    run.type('1++');
    await run.until(/\[1 trace\]/);
    run.type('w');
    await run.until(/› Kaiser β 6/);
    run.type('\u001b[B\r');
    await run.until(/Hann/);
    run.type('q');
    await expectRestored(run, 0);
    expect(run.rows()[0]).toBe('prompt');
  });

  it('follows the terminal through sizes, too small ones among them', async () => {
    run = runInTerminal(FOREGROUND + AFTER, { columns: 140, rows: 40 });
    await run.until(FOUND);
    run.resize(60, 15);
    await run.until(/80 × 24/);
    run.resize(80, 24);
    await run.until(FOUND);
    await run.until(/\? keys {2}q quit$/);
    expect(run.rows().at(-1)).toBe('');
    run.type('\u0003');
    await expectRestored(run, 0);
  });

  it('solves again with another cable', async () => {
    run = runInTerminal(FOREGROUND + AFTER);
    await run.until(FOUND);
    run.type('c');
    await run.until(/cable of the longest section/);
    run.type('rg-213');
    await run.until(/› RG-213/);
    run.type('\r');
    await run.until(/main run 46\.0 m · RG-213/);
    await run.until(/\[1 trace\]/);
    run.type('q');
    await expectRestored(run, 0);
  });

  it.each([
    ['INT', 130],
    ['TERM', 143],
    ['HUP', 129],
  ] as const)('gives the terminal back on SIG%s, and dies of it', async (signal, status) => {
    run = runInTerminal(pidKept(FOREGROUND) + AFTER);
    await run.until(/Ansel Ridge/);
    process.kill(Number(readFileSync(join(run.home, 'pid'), 'utf8')), `SIG${signal}`);
    await expectRestored(run, status);
  });

  it('gives the terminal back when it crashes, and shows the error after', async () => {
    const code =
      "import { isMainThread } from 'node:worker_threads';" +
      "if (isMainThread) setTimeout(() => { throw new Error('made to crash'); }, 1500).unref();";
    const crash = `data:text/javascript,${encodeURIComponent(code).replaceAll("'", '%27')}`;
    run = runInTerminal(FOREGROUND + AFTER, { env: { NODE_OPTIONS: `--import ${crash}` } });
    await run.until(/Ansel Ridge/);
    await run.until(/made to crash/);
    await run.until(/a fault of the program/);
    await expectRestored(run, 2);
  });

  it('is stopped and continued by the shell', async () => {
    run = runInTerminal('PS1="ready> " ENV= exec bash --norc --noprofile -i');
    await run.until(/ready>/);
    run.type('"$NODE" "$PROGRAM" samples/north-1-later.s1p\r');
    await run.until(FOUND);
    run.type('\u001a');
    await run.until(/Stopped/);
    expect(run.isFullScreen()).toBe(false);
    run.type('fg\r');
    await run.until(FOUND);
    expect(run.isFullScreen()).toBe(true);
    run.type('q');
    await run.until(/ready> $|ready>$/);
    expect(run.isFullScreen()).toBe(false);
  });

  it('uses no colour under NO_COLOR and says the same', async () => {
    run = runInTerminal(FOREGROUND + AFTER, { env: { NO_COLOR: '1' }, columns: 80, rows: 24 });
    await run.until(FOUND);
    await run.until(/×.*fault/);
    const parameters = [...run.written().matchAll(/\u001b\[([\d;]*)m/g)].flatMap(([, p]) =>
      p!.split(';').map(Number),
    );
    expect(parameters.filter((p) => p >= 30)).toEqual([]);
    run.type('q');
    await expectRestored(run, 0);
  });
});

/** The same, the process' number kept where another one finds it. */
function pidKept(commandLine: string): string {
  const kept = 'sh -c \'echo $$ > "$HOME/pid"; exec "$@"\' - "$NODE"';
  return commandLine.replace('"$NODE"', () => kept);
}
