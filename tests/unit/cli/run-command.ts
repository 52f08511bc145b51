import { vi } from 'vitest';
import { main } from '../../../server/cli/main.ts';

export interface CommandOutcome {
  code: number;
  out: string;
  err: string;
}

/** Runs `sidewash …` in this process and returns exit code and both streams. */
export async function sidewash(...argv: string[]): Promise<CommandOutcome> {
  const written = { out: '', err: '' };
  const spies = [
    vi.spyOn(process.stdout, 'write').mockImplementation((text) => {
      written.out += String(text);
      return true;
    }),
    vi.spyOn(process.stderr, 'write').mockImplementation((text) => {
      written.err += String(text);
      return true;
    }),
  ];
  try {
    return { code: await main(argv), ...written };
  } finally {
    for (const spy of spies) spy.mockRestore();
  }
}

/** The parsed JSON of a command that must succeed. */
export async function sidewashJson(...argv: string[]): Promise<Record<string, unknown>> {
  const { code, out, err } = await sidewash(...argv, '--json');
  if (code !== 0) throw new Error(`exit code ${code}: ${err}`);
  const parsed: unknown = JSON.parse(out);
  if (typeof parsed !== 'object' || parsed === null) throw new Error('the output is no object');
  return { ...parsed };
}
