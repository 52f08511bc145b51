/** Closures that read signals and compare: written out per operator, because twenty of them run 120 times a second. */
import { isState, MADE_SIGNAL, STATE_SIGNAL } from './names.ts';
import type { ExpressionInputs, SignalName } from './names.ts';

export type NumberReader = (x: ExpressionInputs) => number;
export type TruthReader = (x: ExpressionInputs) => boolean;

/** What a comparison needs to know of either side. */
export interface Operand {
  read: NumberReader;
  constant: number | null;
  /** Place among the signals when the part is a bare name: comparisons with a constant then read it directly. */
  signal: SignalName | null;
}

const COMPARISONS: Readonly<Record<string, (a: NumberReader, b: NumberReader) => TruthReader>> = {
  smaller: (a, b) => (x) => a(x) < b(x),
  smallerEq: (a, b) => (x) => a(x) <= b(x),
  larger: (a, b) => (x) => a(x) > b(x),
  largerEq: (a, b) => (x) => a(x) >= b(x),
  equal: (a, b) => (x) => a(x) === b(x),
  unequal: (a, b) => (x) => a(x) !== b(x),
};
const STATE_WITH_CONSTANT: Readonly<Record<string, (k: number, c: number) => TruthReader>> = {
  smaller: (k, c) => (x) => x.x[k] < c,
  smallerEq: (k, c) => (x) => x.x[k] <= c,
  larger: (k, c) => (x) => x.x[k] > c,
  largerEq: (k, c) => (x) => x.x[k] >= c,
  equal: (k, c) => (x) => x.x[k] === c,
  unequal: (k, c) => (x) => x.x[k] !== c,
};
const MADE_WITH_CONSTANT: Readonly<Record<string, (k: number, c: number) => TruthReader>> = {
  smaller: (k, c) => (x) => x.v[k] < c,
  smallerEq: (k, c) => (x) => x.v[k] <= c,
  larger: (k, c) => (x) => x.v[k] > c,
  largerEq: (k, c) => (x) => x.v[k] >= c,
  equal: (k, c) => (x) => x.v[k] === c,
  unequal: (k, c) => (x) => x.v[k] !== c,
};
const COMPARISONS_WITH_CONSTANT: Readonly<Record<string, (a: NumberReader, c: number) => TruthReader>> = {
  smaller: (a, c) => (x) => a(x) < c,
  smallerEq: (a, c) => (x) => a(x) <= c,
  larger: (a, c) => (x) => a(x) > c,
  largerEq: (a, c) => (x) => a(x) >= c,
  equal: (a, c) => (x) => a(x) === c,
  unequal: (a, c) => (x) => a(x) !== c,
};

/** Reads a signal where it stands. */
export function signalReader(name: SignalName): NumberReader {
  if (isState(name)) {
    const k = STATE_SIGNAL[name];
    return (x) => x.x[k];
  }
  const k = MADE_SIGNAL[name];
  return (x) => x.v[k];
}

export const isComparison = (fn: string): boolean => Object.hasOwn(COMPARISONS, fn);

/** The test of two sides; fastest where the right one is a constant. */
export function comparisonReader(fn: string, left: Operand, right: Operand): TruthReader {
  if (right.constant === null) return COMPARISONS[fn](left.read, right.read);
  if (left.signal !== null) {
    return isState(left.signal)
      ? STATE_WITH_CONSTANT[fn](STATE_SIGNAL[left.signal], right.constant)
      : MADE_WITH_CONSTANT[fn](MADE_SIGNAL[left.signal], right.constant);
  }
  return COMPARISONS_WITH_CONSTANT[fn](left.read, right.constant);
}
