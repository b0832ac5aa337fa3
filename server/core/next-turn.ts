/** Lets what came meanwhile go first: resolves on the event loop's next turn. */
export const nextTurn = (): Promise<void> =>
  new Promise((resolve) => {
    setImmediate(resolve);
  });
