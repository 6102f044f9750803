/** The views there are, in the order of their keys. A new one is named here and drawn in `pictures/`. */
export const VIEW_IDS = ['trace', 'ohms'] as const;

export type ViewId = (typeof VIEW_IDS)[number];
