import { runDecode } from './decode-command';
import { UsageError } from './usage-error';

const USAGE =
  'usage: linewitness decode FILE… [--data NAME] [--rts NAME] [--dtr NAME] [--rulebook FILE|baseline|host-limits] [--format json|log|junit|summary|packets] [--strict]';

async function run(args: readonly string[]): Promise<number> {
  const [command, ...rest] = args;
  switch (command) {
    case 'decode':
      return runDecode(rest);
    default:
      throw new UsageError(command === undefined ? USAGE : `there is no command "${command}"; ${USAGE}`);
  }
}

// A reader that closed the pipe has seen enough.
process.stdout.on('error', (error: NodeJS.ErrnoException) => process.exit(error.code === 'EPIPE' ? 0 : 2));

try {
  process.exitCode = await run(process.argv.slice(2));
} catch (error) {
  // Exactly one line, whatever went wrong: a trace helps nobody who runs this in a pipeline.
  const text = error instanceof UsageError ? error.message : `unexpected: ${String(error)}`;
  process.stderr.write(`${text.replace(/[\p{Cc}\u2028\u2029]+/gu, ' ').trim()}\n`);
  process.exitCode = 2;
}
