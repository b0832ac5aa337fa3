/** What a bridge's response states of a gauge that nothing has to be put right for. */
export const PLAIN_GAUGE = { temperature: null, transverseSensitivity: 0, grid: null } as const;
