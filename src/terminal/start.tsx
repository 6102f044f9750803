/** Opens the workspace on a terminal and comes back when it is left, with the terminal as it was. */
import { render } from 'ink';
import type { WorkspaceConfig } from './config.ts';
import { paletteFor } from './palettes.ts';
import { createPerform } from './perform.ts';
import { createProgram, type Program } from './program.ts';
import { createScreen, sizeOf } from './screen.ts';
import { openSession } from './session.ts';
import { initialState } from './state.ts';
import { hasColour } from './theme.ts';
import { update } from './update.ts';
import { AppView } from './views/app-view.tsx';

/**
 * Runs the workspace until it is quit.
 *
 * @throws Whatever was thrown and caught nowhere, after the terminal was given back, so that it can be read.
 */
export async function startWorkspace(config: WorkspaceConfig): Promise<void> {
  const { host, stdin, stdout, solver, files, traceWindow } = config;
  const screen = createScreen(stdout);
  const resized = (): void => program.dispatch({ type: 'resized', ...sizeOf(stdout) });
  const session = openSession({ host, stdin, screen, onResume: resized });
  const program: Program = createProgram({
    initial: initialState({
      ...sizeOf(stdout),
      request: config.initial,
      units: config.units,
      colours: config.colours ?? paletteFor(config.env),
      hasColour: hasColour(config.env),
      glyphs: config.glyphs,
      cables: config.cables,
      cautions: config.cautions,
      openingNotices: config.notices ?? [],
    }),
    update,
    perform: createPerform({
      solver,
      files,
      traceWindow,
      firstLook: async (request, view) => {
        const { firstLook } = await import('../app/first-look.ts');
        return firstLook(request, view);
      },
      redraw: () => {
        screen.forget();
        // One turn for the new frame to be drawn; if none comes, the latest stands again.
        setImmediate(() => setImmediate(screen.restore));
      },
      suspend: session.suspend,
      quit: session.quit,
      defer: setImmediate,
      now: () => performance.now(),
    }),
    defer: setImmediate,
  });
  stdout.on('resize', resized);
  let unmount = (): void => {};
  try {
    const app = render(<AppView program={program} env={config.env} />, {
      stdout: screen.stream,
      stdin,
      // Frames are handed over whole; the screen writes what differs.
      debug: true,
      exitOnCtrlC: false,
      patchConsole: false,
      isScreenReaderEnabled: false,
    });
    unmount = app.unmount;
    program.dispatch({ type: 'started' });
    const { signal } = await Promise.race([session.over, crashOf(app.waitUntilExit())]);
    unmount();
    session.close();
    if (signal) host.kill(host.pid, signal);
  } finally {
    unmount();
    session.close();
    stdout.off('resize', resized);
  }
}

/** Rejects when the view broke; the view ends for no other reason on its own. */
function crashOf(exit: Promise<unknown>): Promise<never> {
  return new Promise((_, reject) => {
    exit.catch(reject);
  });
}
