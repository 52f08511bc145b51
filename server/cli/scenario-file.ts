import { access } from 'node:fs/promises';
import type { Airframe } from '#shared/model/airframe-schema.ts';
import { ModelError } from '#shared/model/errors.ts';
import { ScenarioError } from '#shared/scenario/scenario-errors.ts';
import { checkAgainstAirframe, parseScenario } from '#shared/scenario/scenario-schema.ts';
import type { Scenario } from '#shared/scenario/scenario-schema.ts';
import { issueLine, readAirframe, readJsonFile } from './airframe-file.ts';
import type { ParsedArguments } from './arguments.ts';
import { named } from './condition.ts';
import { shippedAirframeFile } from './shipped-airframes.ts';
import { UsageError } from './usage-error.ts';

export interface ScenarioAndAirframe {
  scenario: Scenario;
  airframe: Airframe;
  /** What the reader must know about the files: warnings, and where the airframe comes from. */
  notes: string[];
}

/** The scenario of a file with the airframe that `--airframe` names, else the shipped one of its slug. */
export async function readScenario(args: ParsedArguments): Promise<ScenarioAndAirframe> {
  const [file] = args.positionals;
  const parsed = parseScenario(await readJsonFile(file));
  if (!parsed.ok) throw new UsageError(issueLine(file, parsed.issues));
  const { scenario } = parsed;
  const notes = parsed.warnings.map((warning) => `${warning.field}: ${warning.message}.`);
  const airframe = await airframeOf(args, file, scenario, notes);
  const fit = checkAgainstAirframe(scenario, airframe);
  if (fit.issues.length > 0) throw new UsageError(issueLine(file, fit.issues));
  return { scenario, airframe, notes };
}

async function airframeOf(args: ParsedArguments, file: string, scenario: Scenario, notes: string[]): Promise<Airframe> {
  const given = args.values.get('airframe');
  const quiet = args.flags.has('json');
  const { slug, revision } = scenario.airframe;
  if (given !== undefined) {
    notes.push(`The airframe is that of ${given}; the scenario names "${slug}", revision ${revision}.`);
    return readAirframe(given, quiet);
  }
  const shipped = shippedAirframeFile(slug);
  try {
    await access(shipped);
  } catch {
    throw new UsageError(
      `${file}: /airframe/slug: known-airframe: there is no file scenarios/airframes/${slug}.json (give one with --airframe FILE)`,
    );
  }
  notes.push(
    `The airframe is read from scenarios/airframes/${slug}.json; its revision (${revision} is wanted) is not checked.`,
  );
  return readAirframe(shipped, quiet);
}

const START_REMEDY = 'Change speed, levers, wind or configuration of the start.';

/** Runs a computation and turns the named reasons of scenario, model and numerics into one line about the file. */
export function namedScenario<T>(file: string, compute: () => T): T {
  return named(file, () => {
    try {
      return compute();
    } catch (error) {
      if (error instanceof ModelError)
        throw new UsageError(`${file}: /start: ${error.code}: ${error.message}. ${START_REMEDY}`);
      if (!(error instanceof ScenarioError)) throw error;
      throw new UsageError(
        error.issues.length > 0 ? issueLine(file, error.issues) : `${file}: /events: ${error.code}: ${error.message}`,
      );
    }
  });
}
