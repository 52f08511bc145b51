import { parseArguments } from './arguments.ts';
import type { Command } from './command.ts';
import { CAUTION } from './output.ts';
import { UsageError } from './usage-error.ts';

/** Exit codes: 0 done, 1 a published check is not met or the program failed, 2 wrong input. */
const EXIT_FAILED = 1;
const EXIT_USAGE = 2;

const COMMANDS: Readonly<Record<string, () => Promise<{ command: Command }>>> = {
  modes: () => import('./commands/modes.ts'),
  vmc: () => import('./commands/vmc.ts'),
  crosswind: () => import('./commands/crosswind.ts'),
  run: () => import('./commands/run.ts'),
  budget: () => import('./commands/budget.ts'),
  check: () => import('./commands/check.ts'),
};

/** Runs one command; returns the exit code. Everything that goes wrong becomes one line on standard error. */
export async function main(argv: readonly string[]): Promise<number> {
  const [name, ...rest] = argv;
  try {
    if (name === undefined || name === '--help' || name === 'help') {
      process.stdout.write(`${await overview()}\n`);
      return name === undefined ? EXIT_USAGE : 0;
    }
    if (!Object.hasOwn(COMMANDS, name)) {
      throw new UsageError(`${name}: no such command; there are ${Object.keys(COMMANDS).join(', ')}`);
    }
    const { command } = await COMMANDS[name]();
    if (rest.includes('--help')) {
      process.stdout.write(`sidewash ${command.name} ${command.usage}\n${command.summary}\n`);
      return 0;
    }
    return await command.run(parseArguments(command, rest));
  } catch (error) {
    if (error instanceof UsageError) {
      process.stderr.write(`sidewash: ${error.message}\n`);
      return EXIT_USAGE;
    }
    const detail = error instanceof Error ? `${error.name}: ${error.message}` : String(error);
    process.stderr.write(`sidewash: internal error: ${detail.replaceAll('\n', ' ')}\n`);
    return EXIT_FAILED;
  }
}

async function overview(): Promise<string> {
  const lines = ['usage: sidewash COMMAND …', ''];
  for (const load of Object.values(COMMANDS)) {
    const { command } = await load();
    lines.push(`  ${command.name} ${command.usage}`, `      ${command.summary}`);
  }
  return [...lines, '', CAUTION].join('\n');
}
