/**
 * The words of an expression with their places, and the text that mathjs is given.
 *
 * mathjs keeps no places in its tree. Names, numbers and units are therefore found here first; the tree's leaves come in
 * the same order, so the n-th leaf stands at the n-th place.
 */
import { EXPRESSION_FUNCTIONS, EXPRESSION_NAMES } from './names.ts';
import { UNITS, WORD_UNITS } from './units.ts';

export const MAX_EXPRESSION_LENGTH = 400;
export const MAX_EXPRESSION_NESTING = 16;

/** Where and why an expression is refused. */
export interface ExpressionProblem {
  /** Index of the character, counted from 0. */
  position: number;
  message: string;
  remedy: string;
}

export class ExpressionError extends Error {
  readonly problem: ExpressionProblem;
  constructor(position: number, message: string, remedy: string) {
    super(message);
    this.name = 'ExpressionError';
    this.problem = { position, message, remedy };
  }
}

export interface Token {
  kind: 'number' | 'name' | 'since' | 'sign';
  text: string;
  position: number;
}

/** Stands for "%" and for compound units: mathjs takes % for a remainder or "percent of", and 1/5 deg/s for (1/5 deg)/s. */
const UNIT_SYMBOL = 'unit_';
/** Prefix of the placeholder for the event id inside since(…); ids may contain hyphens. */
export const SINCE_SYMBOL = 'ev_';

const NUMBER = /^(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?/u;
const NAME = /^[A-Za-z_][A-Za-z0-9_]*/u;
const SIGN = /^(?:<=|>=|==|!=|[+\-*/<>(),%])/u;
const LOGIC_WORDS = ['and', 'or', 'not'];

function allowedNames(): string {
  return `${Object.keys(EXPRESSION_NAMES).join(', ')}, since(id)`;
}

function unknownName(name: string, position: number): ExpressionError {
  return new ExpressionError(
    position,
    `"${name}" is not a known name, unit or function`,
    `Use ${allowedNames()}; units kt, ft, deg, m/s, m, s, N, deg/s, ft/min, kt/s, widths, count, %; functions ${EXPRESSION_FUNCTIONS.join(', ')}.`,
  );
}

function badCharacter(text: string, at: number): ExpressionError {
  const c = String.fromCodePoint(text.codePointAt(at) ?? 0);
  if (c === '=') {
    return new ExpressionError(at, '"=" assigns a value, which is not allowed', 'Compare with ==, <, <=, > or >=.');
  }
  if (c === '^') {
    return new ExpressionError(at, 'powers are not allowed', 'Multiply, or use sqrt(…).');
  }
  return new ExpressionError(
    at,
    `"${c}" is not allowed in an expression`,
    'Use + − * /, comparisons, and, or, not, abs, min, max, sqrt, parentheses and commas.',
  );
}

/** The id between the parentheses of since(…), and the index after the closing parenthesis. */
function readSinceId(text: string, from: number): { id: string; idAt: number; end: number } {
  let at = from;
  while (text[at] === ' ') at++;
  const remedy = 'Write since(id) with the id of an event of this scenario.';
  if (text[at] !== '(')
    throw new ExpressionError(Math.min(at, text.length), 'since needs an event id in parentheses', remedy);
  const close = text.indexOf(')', at);
  if (close < 0) throw new ExpressionError(at, 'this parenthesis is not closed', 'Close it with ")".');
  const id = text.slice(at + 1, close).trim();
  let idAt = at + 1;
  while (text[idAt] === ' ') idAt++;
  if (!/^[A-Za-z][A-Za-z0-9_-]*$/u.test(id)) {
    throw new ExpressionError(idAt, id === '' ? 'since() names no event' : `"${id}" is not an event id`, remedy);
  }
  return { id, idAt, end: close + 1 };
}

/** All tokens in order; refuses every character and word outside the small language. */
export function tokenise(source: string): Token[] {
  const text = source.replaceAll('−', '-').replaceAll(/[\t\r\n]/gu, ' ');
  const tokens: Token[] = [];
  let at = 0;
  let depth = 0;
  while (at < text.length) {
    const rest = text.slice(at);
    if (rest[0] === ' ') {
      at++;
      continue;
    }
    const number = NUMBER.exec(rest);
    if (number) {
      const next = rest[number[0].length] ?? ' ';
      if (next === '.' || !Number.isFinite(Number(number[0]))) {
        throw new ExpressionError(
          at,
          `"${number[0]}${next === '.' ? '.' : ''}" is not a number`,
          'Write a plain decimal number.',
        );
      }
      tokens.push({ kind: 'number', text: number[0], position: at });
      at += number[0].length;
      continue;
    }
    const name = NAME.exec(rest);
    if (name) {
      at = pushName(tokens, text, name[0], at);
      continue;
    }
    const sign = SIGN.exec(rest);
    if (!sign) throw badCharacter(text, at);
    if (sign[0] === '(' && ++depth > MAX_EXPRESSION_NESTING) {
      throw new ExpressionError(
        at,
        `parentheses are nested more than ${MAX_EXPRESSION_NESTING} deep`,
        'Split the condition into simpler events.',
      );
    }
    if (sign[0] === ')') depth--;
    tokens.push({ kind: sign[0] === '%' ? 'name' : 'sign', text: sign[0], position: at });
    at += sign[0].length;
  }
  return withCompoundUnits(tokens);
}

/** Joins unit / unit into one compound unit, as deg/s; refuses a quotient that is none. */
function withCompoundUnits(tokens: readonly Token[]): Token[] {
  const joined: Token[] = [];
  for (let i = 0; i < tokens.length; i++) {
    const upper = tokens[i];
    const lower = tokens[i + 2];
    const quotient =
      upper.kind === 'name' && WORD_UNITS.includes(upper.text) && tokens[i + 1]?.text === '/' && lower?.kind === 'name';
    const isCall = tokens[i + 3]?.text === '(';
    if (!quotient || isCall || !(WORD_UNITS.includes(lower.text) || lower.text === 'min')) {
      joined.push(upper);
      continue;
    }
    const text = `${upper.text}/${lower.text}`;
    if (!Object.hasOwn(UNITS, text)) {
      throw new ExpressionError(
        upper.position,
        `"${text}" is not a unit of expressions`,
        'Compound units are m/s, ft/min, deg/s and kt/s.',
      );
    }
    joined.push({ kind: 'name', text, position: upper.position });
    i += 2;
  }
  return joined;
}

function pushName(tokens: Token[], text: string, name: string, at: number): number {
  if (name === 'since') {
    const { id, idAt, end } = readSinceId(text, at + name.length);
    tokens.push({ kind: 'since', text: id, position: idAt });
    return end;
  }
  const known =
    Object.hasOwn(EXPRESSION_NAMES, name) ||
    EXPRESSION_FUNCTIONS.includes(name) ||
    WORD_UNITS.includes(name) ||
    LOGIC_WORDS.includes(name);
  if (!known) throw unknownName(name, at);
  tokens.push({ kind: 'name', text: name, position: at });
  return at + name.length;
}

/** The text for mathjs, with the place in the source of each of its characters. */
export interface ParserText {
  text: string;
  placeOf: (index: number) => number;
}

/**
 * Writes the tokens out for mathjs. "not" binds weaker than a comparison here, as people read it ("not ias > 80 kt"), but
 * stronger in mathjs: its operand gets parentheses up to the next and, or, comma, closing parenthesis or the end.
 */
export function parserText(tokens: readonly Token[], source: string): ParserText {
  let text = '';
  const places: number[] = [];
  const put = (piece: string, position: number): void => {
    for (let i = 0; i < piece.length; i++) places.push(position);
    text += piece;
  };
  let depth = 0;
  const open: number[] = [];
  const closeDownTo = (level: number, position: number): void => {
    while (open.length > 0 && open[open.length - 1] >= level) {
      open.pop();
      put(' )', position);
    }
  };
  for (const token of tokens) {
    const ends = token.text === 'and' || token.text === 'or' || token.text === ',' || token.text === ')';
    if (token.kind !== 'since' && ends) closeDownTo(depth, token.position);
    if (token.text === ')' && token.kind === 'sign') depth--;
    if (token.kind === 'since') put(` since(${SINCE_SYMBOL})`, token.position);
    else if (token.kind === 'name' && /[%/]/u.test(token.text)) put(` ${UNIT_SYMBOL}`, token.position);
    else put(` ${token.text}`, token.position);
    if (token.text === '(') depth++;
    if (token.text === 'not' && token.kind === 'name') {
      put(' (', token.position);
      open.push(depth);
    }
  }
  closeDownTo(0, source.length);
  return { text, placeOf: (index) => places[index] ?? source.length };
}
