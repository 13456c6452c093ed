import { readFileSync } from 'node:fs';
import { EbbError } from '../errors.ts';
import { type CliOptions, FILE_COMMANDS, readArguments } from './arguments.ts';
import { HELP } from './help.ts';
import type { CliSurroundings } from './types.ts';

/**
 * Runs one command.
 * @returns the exit code: 0 answered, 2 the request or the file can't be used, 1 a fault of ours
 */
export async function runCli(args: readonly string[], around: CliSurroundings): Promise<number> {
  const json = args.includes('--json');
  try {
    const [command, ...rest] = args;
    if (command === undefined || command === 'help' || command === '--help' || command === '-h') {
      around.stdout(HELP);
      return 0;
    }
    if (command === '--version') {
      around.stdout(`${version()}\n`);
      return 0;
    }
    const file = FILE_COMMANDS.find((name) => name === command);
    if (file === undefined && command !== 'chart') {
      throw new EbbError(
        'COMMAND_UNKNOWN',
        `there is no command "${command}"`,
        `The commands are ${FILE_COMMANDS.join(', ')} and chart; ebb --help shows how.`,
      );
    }
    const options: CliOptions = readArguments(file ?? 'chart', rest);
    if (options.help) {
      around.stdout(HELP);
      return 0;
    }
    if (file === undefined) await (await import('./chartCommand.ts')).chartCommand(options, around);
    else await (await import('./askCommand.ts')).askCommand(file, options, around);
    return 0;
  } catch (error) {
    return report(error, json, around);
  }
}

function report(error: unknown, json: boolean, around: CliSurroundings): number {
  if (error instanceof EbbError) {
    around.stderr(`${error.message}\n${error.hint}\n`);
    if (json)
      around.stdout(`${JSON.stringify({ error: { code: error.code, message: error.message, hint: error.hint } })}\n`);
    return error.kind === 'bug' ? 1 : 2;
  }
  const text = error instanceof Error ? (error.stack ?? error.message) : String(error);
  around.stderr(`Something went wrong inside Ebbline; this is a fault of ours, not of your file.\n${text}\n`);
  if (json) {
    around.stdout(
      `${JSON.stringify({ error: { code: 'UNEXPECTED', message: 'something went wrong inside Ebbline', hint: 'Standard error holds the details; please report them.' } })}\n`,
    );
  }
  return 1;
}

function version(): string {
  const text = readFileSync(new URL('../../package.json', import.meta.url), 'utf8');
  return (JSON.parse(text) as { version: string }).version;
}
