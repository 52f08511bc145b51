/**
 * Conditions and quantities written by instructors: parsed by mathjs, compiled to closures, checked for names and units.
 *
 * Everything is SI inside. An expression that reads since() of an event that has not fired is false (no value).
 */
import { create, parseDependencies } from 'mathjs/number';
import type { MathNode } from 'mathjs';
import { Compiler } from './compile.ts';
import type { Quantity, Truth } from './compile.ts';
import type { ExpressionInputs } from './names.ts';
import { ExpressionError, MAX_EXPRESSION_LENGTH, parserText, tokenise } from './tokens.ts';
import type { ExpressionProblem } from './tokens.ts';
import { dimensionWords } from './units.ts';
import type { Dimension } from './units.ts';

export type { ExpressionInputs } from './names.ts';
export type { ExpressionProblem } from './tokens.ts';

export interface CompiledCondition {
  source: string;
  /** Events whose time the expression reads. */
  sinceIds: readonly string[];
  /** Where each of them is first read; indices of characters, counted from 0. */
  sincePlaces: readonly number[];
  /** Names it reads, such as "vmc". */
  names: readonly string[];
  /** True when the condition holds and every event it reads has fired. */
  holds(x: ExpressionInputs): boolean;
  /** The same for a caller who knows that every event it reads has fired. */
  holdsOnceFired(x: ExpressionInputs): boolean;
}

export interface CompiledQuantity {
  source: string;
  sinceIds: readonly string[];
  sincePlaces: readonly number[];
  names: readonly string[];
  dimension: Dimension;
  /** SI value; NaN while an event it reads has not fired. */
  value(x: ExpressionInputs): number;
}

type Compiled<T> = ({ ok: true } & T) | { ok: false; problem: ExpressionProblem };

const { parse } = create({ parseDependencies });

type CompiledAsCondition = Compiled<{ condition: CompiledCondition }>;
type CompiledAsQuantity = Compiled<{ quantity: CompiledQuantity }>;

/** Compiled expressions are pure, so thousands of runs of one scenario share them. */
const conditions = new Map<string, CompiledAsCondition>();
const quantities = new Map<string, CompiledAsQuantity>();
const MOST_KEPT = 500;

function kept<T>(known: Map<string, T>, source: string, compile: () => T): T {
  const found = known.get(source);
  if (found !== undefined) return found;
  if (known.size >= MOST_KEPT) known.clear();
  const made = compile();
  known.set(source, made);
  return made;
}

/** A condition for a trigger, or the place and reason of its refusal. */
export function compileCondition(source: string): CompiledAsCondition {
  return kept(conditions, source, () => conditionOf(source));
}

/** A quantity for the measure "expression", or the place and reason of its refusal. */
export function compileQuantity(source: string): CompiledAsQuantity {
  return kept(quantities, source, () => quantityOf(source));
}

function conditionOf(source: string): CompiledAsCondition {
  return guarded(() => {
    const { part, compiler } = compileAny(source);
    if (part.type !== 'truth') {
      throw new ExpressionError(
        part.position,
        `a condition must be true or false, but this is ${dimensionWords(part.dimension)}`,
        'Compare it with a value, as ias < 80 kt.',
      );
    }
    const { read } = part;
    const ids = compiler.sinceIds;
    const holds =
      ids.length === 0
        ? read
        : (x: ExpressionInputs): boolean => {
            for (const id of ids) if (Number.isNaN(x.sinceS(id))) return false;
            return read(x);
          };
    const { names, sincePlaces } = compiler;
    return { condition: { source, sinceIds: ids, sincePlaces, names, holds, holdsOnceFired: read } };
  });
}

function quantityOf(source: string): CompiledAsQuantity {
  return guarded(() => {
    const { part, compiler } = compileAny(source);
    if (part.type !== 'quantity') {
      throw new ExpressionError(
        part.position,
        'a measured expression must be a quantity, but this is true or false',
        'Write the quantity alone, as abs(bank), and put its limit into "limit".',
      );
    }
    const { read, dimension } = part;
    const { sinceIds, sincePlaces, names } = compiler;
    return { quantity: { source, sinceIds, sincePlaces, names, dimension, value: read } };
  });
}

function guarded<T>(work: () => T): Compiled<T> {
  try {
    return { ok: true, ...work() };
  } catch (error) {
    if (error instanceof ExpressionError) return { ok: false, problem: error.problem };
    throw error;
  }
}

function compileAny(source: string): { part: Quantity | Truth; compiler: Compiler } {
  if (source.length > MAX_EXPRESSION_LENGTH) {
    throw new ExpressionError(
      MAX_EXPRESSION_LENGTH,
      `the expression is ${source.length} characters long, more than ${MAX_EXPRESSION_LENGTH}`,
      'Shorten it, or split it into several events.',
    );
  }
  const tokens = tokenise(source);
  if (tokens.length === 0) {
    throw new ExpressionError(0, 'the expression is empty', 'Write a condition, as ias < 80 kt.');
  }
  const prepared = parserText(tokens, source);
  const compiler = new Compiler(tokens);
  return { part: compiler.compile(parseText(prepared.text, prepared.placeOf), 0), compiler };
}

function parseText(text: string, placeOf: (index: number) => number): MathNode {
  try {
    return parse(text);
  } catch (error) {
    // mathjs reports the place as a 1-based `char` on its SyntaxError.
    const char =
      error instanceof Error && 'char' in error && typeof error.char === 'number' ? error.char - 1 : text.length;
    throw new ExpressionError(placeOf(char), 'the expression cannot be read here', readingRemedy(error));
  }
}

function readingRemedy(error: unknown): string {
  const message = error instanceof Error ? error.message : '';
  if (message.includes('Parenthesis )')) return 'Close every parenthesis with ")".';
  if (message.includes('Unexpected end') || message.includes('Value expected')) return 'A value is missing.';
  return 'Check operators and parentheses at this place.';
}
