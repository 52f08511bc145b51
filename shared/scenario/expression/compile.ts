/**
 * From mathjs' syntax tree to closures over SI numbers, with the dimension of every part checked.
 *
 * mathjs only parses. Whatever is not listed here (property access, assignment, powers, strings, matrices, further
 * functions) is refused with its place.
 */
import type { MathNode, OperatorNode } from 'mathjs';
import { EXPRESSION_FUNCTIONS, EXPRESSION_NAMES } from './names.ts';
import { comparisonReader, isComparison, signalReader } from './readers.ts';
import type { NumberReader, Operand, TruthReader } from './readers.ts';
import { ExpressionError, MAX_EXPRESSION_NESTING, SINCE_SYMBOL } from './tokens.ts';
import type { Token } from './tokens.ts';
import { dimensionWords, NUMBER, sameDimension, TIME, timesPower, UNITS, unitsOf } from './units.ts';
import type { Dimension } from './units.ts';

export interface Quantity extends Operand {
  type: 'quantity';
  dimension: Dimension;
  position: number;
}
export interface Truth {
  type: 'truth';
  read: TruthReader;
  position: number;
}
type Part = Quantity | Truth;

/** Compiles one tree; the leaves are taken from `tokens` in order. */
export class Compiler {
  readonly sinceIds: string[] = [];
  /** Where each event id is first read, in the order of `sinceIds`. */
  readonly sincePlaces: number[] = [];
  readonly names: string[] = [];
  private readonly leaves: Token[];
  private readonly comparisons: number[];
  private next = 0;
  private last = 0;

  constructor(tokens: readonly Token[]) {
    this.comparisons = tokens.filter(({ kind, text }) => kind === 'sign' && /[<>=]/u.test(text)).map((t) => t.position);
    this.leaves = tokens.filter((token) => token.kind !== 'sign' && !['and', 'or', 'not'].includes(token.text));
  }

  compile(node: MathNode, depth: number): Part {
    switch (node.type) {
      case 'ParenthesisNode':
        return this.inner(childrenOf(node)[0], depth);
      case 'ConstantNode':
        return this.number();
      case 'SymbolNode':
        return this.name();
      case 'FunctionNode':
        return this.call(node, depth);
      case 'OperatorNode':
        return this.operator(node as OperatorNode, depth);
      case 'RelationalNode':
        throw this.refuse(
          'comparisons cannot be chained',
          'Join two comparisons with and, as ias > 60 kt and ias < 80 kt.',
          this.comparisons.filter((place) => place > this.here())[1],
        );
      default:
        throw this.refuse('this form is not allowed in an expression', 'Use arithmetic, comparisons, and, or, not.');
    }
  }

  private here(): number {
    return this.leaves[this.next]?.position ?? this.last;
  }

  private refuse(message: string, remedy: string, position = this.here()): ExpressionError {
    return new ExpressionError(position, message, remedy);
  }

  private take(): Token {
    const token = this.leaves[this.next++];
    if (token === undefined) throw this.refuse('the expression cannot be read here', 'Write it more simply.');
    this.last = token.position;
    return token;
  }

  private inner(node: MathNode, depth: number): Part {
    if (depth >= MAX_EXPRESSION_NESTING) {
      throw this.refuse(`nested more than ${MAX_EXPRESSION_NESTING} deep`, 'Split the condition into simpler events.');
    }
    return this.compile(node, depth + 1);
  }

  private number(): Quantity {
    const token = this.take();
    return constantPart(Number(token.text), NUMBER, token.position);
  }

  private name(): Quantity {
    const token = this.take();
    const known = Object.hasOwn(EXPRESSION_NAMES, token.text) ? EXPRESSION_NAMES[token.text] : null;
    if (known === null) {
      throw this.refuse(
        EXPRESSION_FUNCTIONS.includes(token.text)
          ? `${token.text} needs its arguments`
          : `the unit "${token.text}" has no number before it`,
        EXPRESSION_FUNCTIONS.includes(token.text)
          ? `Write ${token.text}(…).`
          : `Write a number and the unit, as 5 ${token.text}.`,
        token.position,
      );
    }
    if (!this.names.includes(token.text)) this.names.push(token.text);
    return {
      type: 'quantity',
      dimension: known.dimension,
      read: signalReader(known.signal),
      constant: null,
      signal: known.signal,
      position: token.position,
    };
  }

  private call(node: MathNode, depth: number): Quantity {
    const token = this.take();
    if (token.kind === 'since') {
      const id = token.text;
      if (!this.sinceIds.includes(id)) {
        this.sinceIds.push(id);
        this.sincePlaces.push(token.position);
      }
      this.skipSinceSymbol(node);
      return {
        type: 'quantity',
        dimension: TIME,
        read: (x) => x.sinceS(id),
        constant: null,
        signal: null,
        position: token.position,
      };
    }
    if (!EXPRESSION_FUNCTIONS.includes(token.text)) {
      throw this.refuse(
        `"${token.text}" is not a function`,
        `Functions are ${EXPRESSION_FUNCTIONS.join(', ')} and since(id).`,
        token.position,
      );
    }
    const args = argumentsOf(node).map((arg) => this.quantity(this.inner(arg, depth), `an argument of ${token.text}`));
    const several = token.text === 'min' || token.text === 'max';
    if (several ? args.length < 2 : args.length !== 1) {
      throw this.refuse(
        `${token.text} takes ${several ? 'two or more arguments' : 'one argument'}, not ${args.length}`,
        several ? `Write ${token.text}(a, b).` : `Write ${token.text}(a).`,
        token.position,
      );
    }
    return this.applyFunction(token, args);
  }

  private applyFunction(token: Token, args: Quantity[]): Quantity {
    const [a] = args;
    const f = a.read;
    const position = token.position;
    if (token.text === 'abs') {
      return {
        type: 'quantity',
        dimension: a.dimension,
        read: (x) => Math.abs(f(x)),
        constant: null,
        signal: null,
        position,
      };
    }
    if (token.text === 'sqrt') {
      const half = timesPower(NUMBER, a.dimension, 0.5);
      return {
        type: 'quantity',
        dimension: half,
        read: (x) => Math.sqrt(f(x)),
        constant: null,
        signal: null,
        position,
      };
    }
    for (const other of args) this.requireSame(a, other, token.text);
    const readers = args.map((arg) => arg.read);
    const pick = token.text === 'min' ? Math.min : Math.max;
    const read: NumberReader = (x) => {
      let best = readers[0](x);
      for (let i = 1; i < readers.length; i++) best = pick(best, readers[i](x));
      return best;
    };
    return { type: 'quantity', dimension: a.dimension, read, constant: null, signal: null, position };
  }

  /** since(…) was tokenised as one word; its placeholder argument must be the only one and carries no token of its own. */
  private skipSinceSymbol(node: MathNode): void {
    const args = argumentsOf(node);
    if (args.length !== 1 || !('name' in args[0]) || args[0].name !== SINCE_SYMBOL) {
      throw this.refuse('since takes one event id', 'Write since(id).', this.last);
    }
  }

  private operator(node: OperatorNode, depth: number): Part {
    const fn = String(node.fn);
    const args = node.args;
    if (fn === 'not') {
      const part = this.truth(this.inner(args[0], depth), 'not');
      const f = part.read;
      return { type: 'truth', read: (x) => !f(x), position: part.position };
    }
    if (fn === 'unaryMinus' || fn === 'unaryPlus') {
      const part = this.quantity(this.inner(args[0], depth), 'a sign');
      if (fn === 'unaryPlus') return part;
      const f = part.read;
      if (part.constant !== null) return constantPart(-part.constant, part.dimension, part.position);
      return { ...part, signal: null, read: (x) => -f(x) };
    }
    if (fn === 'and' || fn === 'or') {
      const left = this.truth(this.compile(args[0], depth), fn);
      const right = this.truth(this.compile(args[1], depth), fn);
      const a = left.read;
      const b = right.read;
      return { type: 'truth', read: fn === 'and' ? (x) => a(x) && b(x) : (x) => a(x) || b(x), position: left.position };
    }
    if (isComparison(fn)) return this.comparison(fn, args, depth);
    if (fn === 'multiply' && node.implicit) return this.withUnit(args, depth);
    if (fn === 'divide') return this.quotient(args, depth);
    if (fn === 'multiply' || fn === 'add' || fn === 'subtract') {
      const left = this.quantity(this.compile(args[0], depth), `the left of "${node.op}"`);
      const right = this.quantity(this.compile(args[1], depth), `the right of "${node.op}"`);
      return this.arithmetic(fn, left, right);
    }
    throw this.refuse(`the operator "${node.op}" is not allowed`, 'Use + − * /, comparisons, and, or, not.');
  }

  private comparison(fn: string, args: MathNode[], depth: number): Truth {
    const left = this.quantity(this.compile(args[0], depth), 'the left of a comparison');
    const right = this.quantity(this.compile(args[1], depth), 'the right of a comparison');
    this.requireSame(left, right, 'a comparison');
    return { type: 'truth', read: comparisonReader(fn, left, right), position: left.position };
  }

  private arithmetic(fn: string, left: Quantity, right: Quantity): Quantity {
    const a = left.read;
    const b = right.read;
    if (fn !== 'multiply') this.requireSame(left, right, fn === 'add' ? 'a sum' : 'a difference');
    const dimension = fn === 'multiply' ? timesPower(left.dimension, right.dimension, 1) : left.dimension;
    const read: NumberReader =
      fn === 'multiply' ? (x) => a(x) * b(x) : fn === 'add' ? (x) => a(x) + b(x) : (x) => a(x) - b(x);
    const constant =
      left.constant === null || right.constant === null
        ? null
        : fn === 'multiply'
          ? left.constant * right.constant
          : fn === 'add'
            ? left.constant + right.constant
            : left.constant - right.constant;
    if (constant !== null) return this.finite(constant, dimension, left.position);
    return { type: 'quantity', dimension, read, constant, signal: null, position: left.position };
  }

  /** A number (or parenthesis) followed by a unit. */
  private withUnit(args: MathNode[], depth: number): Quantity {
    const left = this.quantity(this.compile(args[0], depth), 'the number before a unit');
    const token = this.leaves[this.next];
    if (
      args[1].type !== 'SymbolNode' ||
      token === undefined ||
      !(Object.hasOwn(UNITS, token.text) || token.text === 'min')
    ) {
      throw this.refuse('an operator is missing here', 'Write + − * / or a comparison between the two parts.');
    }
    this.take();
    if (token.text === 'min') {
      throw this.refuse('"min" is a unit only in ft/min', 'Write ft/min, or times in s.', token.position);
    }
    return this.scale(left, UNITS[token.text]);
  }

  private scale(left: Quantity, unit: { dimension: Dimension; factor: number }): Quantity {
    const dimension = timesPower(left.dimension, unit.dimension, 1);
    const factor = unit.factor;
    if (left.constant !== null) return this.finite(left.constant * factor, dimension, left.position);
    const f = left.read;
    return { ...left, signal: null, dimension, read: (x) => f(x) * factor };
  }

  private quotient(args: MathNode[], depth: number): Quantity {
    const left = this.quantity(this.compile(args[0], depth), 'the left of "/"');
    const right = this.quantity(this.compile(args[1], depth), 'the right of "/"');
    const dimension = timesPower(left.dimension, right.dimension, -1);
    const a = left.read;
    const b = right.read;
    if (right.constant === 0) throw this.refuse('this divides by zero', 'Divide by another value.', right.position);
    if (left.constant !== null && right.constant !== null) {
      return this.finite(left.constant / right.constant, dimension, left.position);
    }
    return {
      type: 'quantity',
      dimension,
      read: (x) => a(x) / b(x),
      constant: null,
      signal: null,
      position: left.position,
    };
  }

  /** A constant that was worked out; one too large for a number is refused where it begins. */
  private finite(value: number, dimension: Dimension, position: number): Quantity {
    if (Number.isFinite(value)) return constantPart(value, dimension, position);
    throw this.refuse('this value is too large for a number', 'Write a smaller value.', position);
  }

  private quantity(part: Part, where: string): Quantity {
    if (part.type === 'quantity') return part;
    throw this.refuse(
      `${where} must be a quantity, but this is true or false`,
      'Compare quantities first, then join with and, or, not.',
      part.position,
    );
  }

  private truth(part: Part, word: string): Truth {
    if (part.type === 'truth') return part;
    throw this.refuse(
      `${word} joins comparisons, but this is ${dimensionWords(part.dimension)}`,
      'Compare it with a value first, as ias < 80 kt.',
      part.position,
    );
  }

  private requireSame(left: Quantity, right: Quantity, where: string): void {
    if (sameDimension(left.dimension, right.dimension)) return;
    const wanted = unitsOf(left.dimension).filter((unit) => unit !== 'count');
    const bare = right.constant !== null && sameDimension(right.dimension, NUMBER) && wanted.length > 0;
    throw this.refuse(
      `units do not match in ${where}: ${dimensionWords(left.dimension)} with ${dimensionWords(right.dimension)}`,
      bare ? `Give the number a unit: ${wanted.join(', ')}.` : 'Bring both sides to the same kind of quantity.',
      right.position,
    );
  }
}

function constantPart(value: number, dimension: Dimension, position: number): Quantity {
  return { type: 'quantity', dimension, read: () => value, constant: value, signal: null, position };
}

function childrenOf(node: MathNode): MathNode[] {
  const found: MathNode[] = [];
  node.forEach((child) => void found.push(child));
  return found;
}

/** Arguments of a call, without the called name. */
function argumentsOf(node: MathNode): MathNode[] {
  return 'args' in node && Array.isArray(node.args) ? node.args : [];
}
