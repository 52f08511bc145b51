import type { ParsedArguments } from './arguments.ts';

/** One subcommand of `sidewash`. */
export interface Command {
  name: string;
  /** One line: the arguments after the name. */
  usage: string;
  /** One sentence for the list of commands. */
  summary: string;
  /** Names of the positional arguments, all required. */
  positionals: readonly string[];
  /** Options by name without the dashes: with a value, or a flag. */
  options: Readonly<Record<string, 'value' | 'flag'>>;
  /** Does the work and prints; returns the exit code. Throws UsageError for wrong input. */
  run(args: ParsedArguments): number | Promise<number>;
}
