import { readFileSync, readdirSync } from 'node:fs';
import path from 'node:path';
import { parseAirframe, type Airframe } from '#shared/model/airframe-schema.ts';
import type { FieldIssue } from '#shared/model/field-issue.ts';
import { checkAgainstAirframe, parseScenario, type Scenario } from '#shared/scenario/scenario-schema.ts';

export interface LibraryAirframe {
  slug: string;
  airframe: Airframe;
  document: unknown;
}
export interface LibraryScenario {
  slug: string;
  scenario: Scenario;
  document: unknown;
}
export interface Library {
  airframes: LibraryAirframe[];
  scenarios: LibraryScenario[];
  /** One sentence a fault: file, field, rule and remedy. */
  problems: string[];
}

/** A file beyond this is no airframe or scenario. */
const LARGEST_FILE_BYTES = 2_000_000;
const SLUG = /^[a-z0-9]+(?:-[a-z0-9]+)*$/u;

const sentence = (file: string, { field, rule, message, remedy }: FieldIssue): string =>
  `${file} is not seeded: ${field === '' ? 'the file' : field} breaks the rule "${rule}": ${message}. ${remedy}`;

/** Reads the shipped airframes and scenarios of a folder. A file with a fault is named and left out; the others stand. */
export function readLibrary(folder: string): Library {
  const problems: string[] = [];
  const airframes: LibraryAirframe[] = [];
  const scenarios: LibraryScenario[] = [];
  for (const { slug, file, document } of jsonFiles(path.join(folder, 'airframes'), 'airframes/', problems)) {
    const parsed = parseAirframe(document);
    if (parsed.ok) airframes.push({ slug, airframe: parsed.airframe, document });
    else problems.push(...parsed.issues.map((issue) => sentence(file, issue)));
  }
  for (const { slug, file, document } of jsonFiles(folder, '', problems)) {
    const parsed = parseScenario(document);
    if (!parsed.ok) {
      problems.push(...parsed.issues.map((issue) => sentence(file, issue)));
      continue;
    }
    const { scenario } = parsed;
    const airframe = airframes.find((a) => a.slug === scenario.airframe.slug);
    if (airframe === undefined || scenario.airframe.revision !== 1) {
      problems.push(
        sentence(file, {
          field: '/airframe',
          rule: 'known-airframe',
          message: `there is no airframe "${scenario.airframe.slug}" revision ${scenario.airframe.revision} among the seeded ones`,
          remedy: 'Name a shipped airframe, revision 1.',
        }),
      );
      continue;
    }
    const { issues } = checkAgainstAirframe(scenario, airframe.airframe);
    if (issues.length > 0) problems.push(...issues.map((issue) => sentence(file, issue)));
    else scenarios.push({ slug, scenario, document });
  }
  return { airframes, scenarios, problems };
}

function jsonFiles(
  folder: string,
  prefix: string,
  problems: string[],
): { slug: string; file: string; document: unknown }[] {
  const out: { slug: string; file: string; document: unknown }[] = [];
  for (const name of readdirSync(folder).sort()) {
    if (!name.endsWith('.json')) continue;
    const file = prefix + name;
    const slug = name.slice(0, -'.json'.length);
    const refuse = (rule: string, message: string, remedy: string): void =>
      void problems.push(sentence(file, { field: '', rule, message, remedy }));
    if (!SLUG.test(slug)) {
      refuse('file-name', `"${name}" is no slug`, 'Use lower-case letters, digits and hyphens.');
      continue;
    }
    try {
      const text = readFileSync(path.join(folder, name), 'utf8');
      if (text.length > LARGEST_FILE_BYTES)
        refuse('size', `it has ${text.length} characters`, `Keep it below ${LARGEST_FILE_BYTES}.`);
      else out.push({ slug, file, document: JSON.parse(text) as unknown });
    } catch (error) {
      refuse('json', error instanceof Error ? error.message : 'it cannot be read', 'Correct the JSON.');
    }
  }
  return out;
}
