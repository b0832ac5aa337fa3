/** The process: arguments to a configuration, start, and an orderly stop on a signal. */
import { startApp } from './app.ts';
import { readConfig, USAGE } from './config.ts';

const say = (line: string) => process.stdout.write(`${line}\n`);
const complain = (line: string) => process.stderr.write(`${line}\n`);

const main = async (): Promise<void> => {
  const args = process.argv.slice(2);
  if (args.includes('--help')) {
    say(USAGE);
    return;
  }
  const read = readConfig(args, process.cwd());
  if (!read.ok) {
    for (const { path, expected, came } of read.faults) {
      complain(`${path}: expected ${expected}, came ${came}`);
    }
    complain(`\n${USAGE}`);
    process.exitCode = 2;
    return;
  }
  const app = await startApp(read.config, say);
  let stopping = false;
  const stop = (signal: string) => {
    if (stopping) return;
    stopping = true;
    say(`${signal}: finishing what came, then stopping`);
    void app.stop().then(() => say('Stopped.'));
  };
  process.on('SIGINT', () => stop('SIGINT'));
  process.on('SIGTERM', () => stop('SIGTERM'));
};

main().catch((error: unknown) => {
  complain(`Yieldward did not start. ${error instanceof Error ? error.message : String(error)}`);
  process.exitCode = 1;
});
