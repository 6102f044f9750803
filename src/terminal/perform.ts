/** The one place where effects are done. */
import type { AnalyseRequest, Solver } from '../app/solver.ts';
import type { DistanceTrace } from '../locate/distance-trace.ts';
import { assertNever, fail } from '../outcome.ts';
import type { FileAccess, LookView, TraceWindow } from './config.ts';
import type { Effect } from './effects.ts';
import type { Event } from './events.ts';

/** Progress is passed on at most this often, ms. */
const PROGRESS_EVERY_MS = 100;

/** What effects need of the world. */
export type World = {
  readonly solver: Solver;
  readonly files: FileAccess;
  readonly traceWindow: TraceWindow;
  /** A first trace of the described line; null when there is none. */
  readonly firstLook: (request: AnalyseRequest, view: LookView) => Promise<DistanceTrace | null>;
  readonly redraw: () => void;
  readonly suspend: () => void;
  readonly quit: () => void;
  /** Runs a job after the events now at hand. */
  readonly defer: (job: () => void) => void;
  /** Milliseconds of a clock that never goes back. */
  readonly now: () => number;
};

/** Builds the function that does effects in a world. */
export function createPerform(world: World): (effect: Effect, dispatch: (event: Event) => void) => void {
  let stop: (() => void) | null = null;
  let latestTrace: Extract<Effect, { type: 'trace' }> | null = null;

  const solve = (effect: Extract<Effect, { type: 'solve' }>, dispatch: (event: Event) => void): void => {
    stop?.();
    let lastToldMs = Number.NEGATIVE_INFINITY;
    const solving = world.solver.solve(effect.request, ({ stage, fraction }) => {
      if (world.now() - lastToldMs < PROGRESS_EVERY_MS) return;
      lastToldMs = world.now();
      dispatch({ type: 'progress', id: effect.id, stage, fraction });
    });
    stop = () => solving.cancel();
    solving.result.then(
      (outcome) => dispatch({ type: 'solved', id: effect.id, outcome }),
      (error: unknown) =>
        dispatch({
          type: 'solved',
          id: effect.id,
          outcome: fail({
            code: 'solver-stopped',
            what: `the solver stopped: ${error instanceof Error ? error.message : String(error)}`,
            mend: 'this is a fault of the program; please report it with the sweep that shows it',
          }),
        }),
    );
  };

  const trace = (effect: Extract<Effect, { type: 'trace' }>, dispatch: (event: Event) => void): void => {
    const waiting = latestTrace !== null;
    latestTrace = effect;
    if (waiting) return;
    world.defer(() => {
      const wish = latestTrace;
      latestTrace = null;
      if (wish) dispatch({ type: 'traced', id: wish.id, trace: world.traceWindow(wish.analysis, wish.view) });
    });
  };

  return (effect, dispatch) => {
    switch (effect.type) {
      case 'solve':
        return solve(effect, dispatch);
      case 'look':
        // A first look is no answer: when it fails, the answer itself will say why.
        world.firstLook(effect.request, effect.view).then(
          (trace) => trace && dispatch({ type: 'looked', id: effect.id, trace }),
          () => {},
        );
        return;
      case 'stopSolving':
        stop?.();
        stop = null;
        return;
      case 'readSweep':
        world.files.readSweep(effect.file).then(
          (outcome) => dispatch({ type: 'sweepRead', id: effect.id, outcome }),
          (error: unknown) =>
            dispatch({
              type: 'sweepRead',
              id: effect.id,
              outcome: fail({
                code: 'sweep-unreadable',
                file: effect.file,
                what: `the sweep could not be read: ${error instanceof Error ? error.message : String(error)}`,
                mend: 'see that the file is there and can be read, then read it again',
              }),
            }),
        );
        return;
      case 'trace':
        return trace(effect, dispatch);
      case 'redraw':
        return world.redraw();
      case 'suspend':
        return world.suspend();
      case 'quit':
        return world.quit();
      default:
        return assertNever(effect);
    }
  };
}
