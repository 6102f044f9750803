/** The one component that knows the program: takes its state and sends it keys. */
import { type Key, useInput } from 'ink';
import { type ReactElement, useCallback } from 'react';
import { useProgram } from '../hooks/use-program.ts';
import { eventFor } from '../keys.ts';
import type { Program } from '../program.ts';
import { strokesOf } from '../strokes.ts';
import { themeFor } from '../theme.ts';
import { ScreenView } from './screen-view.tsx';

/** The whole screen. */
export function AppView({
  program,
  env,
}: {
  readonly program: Program;
  /** What the terminal says of itself, and NO_COLOR. */
  readonly env: Readonly<Record<string, string | undefined>>;
}): ReactElement {
  const state = useProgram(program);
  const onInput = useCallback(
    (input: string, key: Key) => {
      for (const stroke of strokesOf(input, key)) {
        const event = eventFor(program.snapshot(), stroke);
        if (event) program.dispatch(event);
      }
    },
    [program],
  );
  useInput(onInput);
  return <ScreenView state={state} theme={themeFor(env, state)} />;
}
