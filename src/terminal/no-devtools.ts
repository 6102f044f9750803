/**
 * Stands in for the UI library's developer tools, which it imports by default export when the environment says
 * DEV=true. They are no dependency of ours: the build puts this in their place, and nothing happens.
 */
const noDevtools = {
  initialize(): void {},
  connectToDevTools(): void {},
};

// biome-ignore lint/style/noDefaultExport: the library imports the default
export default noDevtools;
