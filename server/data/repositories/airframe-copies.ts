import { AIRPLANE_CLASSES, type EngineKinds } from '#shared/contracts/airframes.ts';

/** What the columns of a revision repeat of its document, for lists and searches. */
export interface AirframeCopies {
  name: string;
  airplaneClass: string;
  engineCount: number;
}

const UNNAMED = 'Unnamed airframe';
const LONGEST_NAME = 200;
const LONGEST_SEARCH_TEXT = 4000;
const CLASSES: readonly string[] = [...AIRPLANE_CLASSES, 'II'];

const member = (value: unknown, name: string): unknown =>
  typeof value === 'object' && value !== null && Object.hasOwn(value, name) ? Reflect.get(value, name) : undefined;
const list = (value: unknown): unknown[] => (Array.isArray(value) ? value : []);
const text = (value: unknown): string => (typeof value === 'string' ? value.trim() : '');

/** The copies of a document that may be unfinished: what cannot be read from it is blank or none. */
export function copiesOf(document: unknown): AirframeCopies {
  const airplaneClass = text(member(document, 'class'));
  return {
    name: text(member(document, 'name')).slice(0, LONGEST_NAME) || UNNAMED,
    airplaneClass: CLASSES.includes(airplaneClass) ? airplaneClass : '',
    engineCount: list(member(document, 'engines')).length,
  };
}

export function engineKindOf(document: unknown): EngineKinds {
  const kinds = new Set(list(member(document, 'engines')).map((engine) => member(engine, 'kind')));
  if (kinds.has('jet') && kinds.has('propeller')) return 'mixed';
  if (kinds.has('jet')) return 'jet';
  return kinds.has('propeller') ? 'propeller' : 'none';
}

/** What a search looks through besides slug and tags: name, description and sources. */
export function searchTextOf(document: unknown): string {
  const sources = list(member(document, 'sources')).map((source) => text(member(source, 'text')));
  return [copiesOf(document).name, text(member(document, 'description')), ...sources]
    .join(' ')
    .slice(0, LONGEST_SEARCH_TEXT);
}

/** A text as searches and tags are compared: without case, accents and differences of writing. */
export const comparisonKey = (value: string): string =>
  value
    .normalize('NFKD')
    .replace(/\p{Mark}/gu, '')
    .toLowerCase()
    .trim();
