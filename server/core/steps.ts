/** One part of the running server: begun in order, ended in reverse. */
export interface Step {
  readonly name: string;
  readonly start: () => Promise<void> | void;
  readonly stop?: () => Promise<void> | void;
}

/**
 * Begins the steps one after the other. If one fails, those begun are ended in
 * reverse and the failure, naming its step, is thrown. Returns what ends them all.
 */
export const runSteps = async (
  steps: readonly Step[],
  say: (line: string) => void,
): Promise<() => Promise<void>> => {
  const begun: Step[] = [];
  const stop = async () => {
    for (const step of begun.splice(0).reverse()) {
      try {
        await step.stop?.();
      } catch (error) {
        say(`while stopping ${step.name}: ${String(error)}`);
      }
    }
  };
  for (const step of steps) {
    try {
      await step.start();
      begun.push(step);
    } catch (error) {
      await stop();
      throw new Error(`${step.name}: ${error instanceof Error ? error.message : String(error)}`, {
        cause: error,
      });
    }
  }
  return stop;
};
