/** `npm run build`: installs and builds what is missing or has changed. */
import { prepare, StepFailed } from './prepare.mjs';

try {
  await prepare();
} catch (error) {
  if (!(error instanceof StepFailed)) throw error;
  process.stderr.write(`${error.message}\n`);
  process.exitCode = 1;
}
