import { afterEach, beforeEach } from 'vitest';

/**
 * Fails a test that prints a warning or an error nobody asked for. A test that expects one puts its own
 * `vi.spyOn(console, 'warn').mockImplementation(…)` over this and asserts it there.
 */
let printed: string[] = [];
const original = { warn: console.warn, error: console.error };

beforeEach(() => {
  printed = [];
  console.warn = (...parts: unknown[]) => void printed.push(`console.warn: ${parts.map(String).join(' ')}`);
  console.error = (...parts: unknown[]) => void printed.push(`console.error: ${parts.map(String).join(' ')}`);
});

afterEach(() => {
  console.warn = original.warn;
  console.error = original.error;
  if (printed.length > 0) throw new Error(`Unexpected console output:\n${printed.join('\n')}`);
});
