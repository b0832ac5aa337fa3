/** `npm start`: installs and builds what is missing, then runs the server in this terminal. */
import { spawn } from 'node:child_process';
import { constants } from 'node:os';
import { join } from 'node:path';
import { prepare, ROOT, StepFailed } from './prepare.mjs';

const SIGNALS = /** @type {const} */ (['SIGINT', 'SIGTERM', 'SIGHUP']);

const serve = () => {
  const server = spawn(
    process.execPath,
    [join(ROOT, 'dist', 'server', 'main.js'), ...process.argv.slice(2)],
    { stdio: 'inherit' },
  );
  for (const signal of SIGNALS) process.on(signal, () => server.kill(signal));
  server.once('error', (error) => {
    process.stderr.write(`The server could not be started: ${error.message}\n`);
    process.exitCode = 1;
  });
  server.once('exit', (code, signal) => {
    process.exitCode = code ?? (signal ? 128 + constants.signals[signal] : 1);
  });
};

try {
  await prepare();
  serve();
} catch (error) {
  if (!(error instanceof StepFailed)) throw error;
  process.stderr.write(`${error.message}\n`);
  process.exitCode = 1;
}
