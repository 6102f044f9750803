/** Rows of runs on the screen, one line of text each. */
import { Box, Text } from 'ink';
import type { ReactElement } from 'react';
import type { Run } from '../../plot/run.ts';
import { styledText, type Theme } from '../theme.ts';

/** Draws rows from the top; each must already have its width. */
export function Rows(props: {
  readonly rows: readonly (readonly Run[])[];
  readonly theme: Theme;
}): ReactElement {
  return (
    <Box flexDirection="column">
      {props.rows.map((row, index) => (
        // biome-ignore lint/suspicious/noArrayIndexKey: a row is its place on the screen
        <Text key={index} wrap="truncate">
          {/* The library looks at every cell, blank ones too; those at the end it drops in the end. */}
          {styledText(row, props.theme).trimEnd() || ' '}
        </Text>
      ))}
    </Box>
  );
}
