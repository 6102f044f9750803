/** The one component that knows the program: takes its state, sends it keys, and chooses the view. */
import { type Key, useInput } from 'ink';
import { type ReactElement, useCallback } from 'react';
import { useProgram } from '../hooks/use-program.ts';
import { eventFor } from '../keys.ts';
import { Rows } from '../parts/rows.tsx';
import type { Program } from '../program.ts';
import { strokesOf } from '../strokes.ts';
import type { Theme } from '../theme.ts';
import { screenRows } from './screen-rows.ts';

/** The whole screen. */
export function AppView({
  program,
  theme,
}: {
  readonly program: Program;
  readonly theme: Theme;
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
  return <Rows rows={screenRows(state)} theme={theme} />;
}
