/** The smallest program of the UI library: what the first frame of the workspace is measured against. */
import { Box, render, Text } from 'ink';

const app = render(
  <Box>
    <Text>hello</Text>
  </Box>,
);
setTimeout(() => app.unmount(), 2000);
