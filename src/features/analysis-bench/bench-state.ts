/** Everything the Analysis screen shows follows from this state; it lives in the address and in saved studies. */
import { z } from 'zod';
import { DERIVATIVE_KEYS } from '../../runner/workers/analysis/bench-condition.ts';
import { DISPERSION_QUANTITIES } from '../../runner/workers/analysis/bench-dispersion.ts';

export const BENCH_TABS = [
  { value: 'modes', text: 'Modes' },
  { value: 'map', text: 'Map and responses' },
  { value: 'engine-out', text: 'Engine out' },
  { value: 'crosswind', text: 'Crosswind' },
  { value: 'dispersion', text: 'Dispersion' },
] as const;
export type BenchTab = (typeof BENCH_TABS)[number]['value'];

const number = (low: number, high: number) => z.coerce.number().min(low).max(high);
const derivative = z.enum(DERIVATIVE_KEYS);

/** Shifts as text: "Cn_beta:0.02,Cl_beta:-0.01". */
const shiftsText = z
  .string()
  .max(400)
  .transform((text) => {
    const out: Partial<Record<(typeof DERIVATIVE_KEYS)[number], number>> = {};
    for (const part of text.split(',')) {
      const [key, by] = part.split(':');
      const known = derivative.safeParse(key);
      const value = Number(by);
      if (known.success && Number.isFinite(value) && Math.abs(value) <= 10) out[known.data] = value;
    }
    return out;
  });

export const benchStateSchema = z.object({
  tab: z
    .enum(BENCH_TABS.map((t) => t.value))
    .catch('modes')
    .default('modes'),
  airframe: z.string().max(80).default(''),
  revision: number(0, 1_000_000).int().catch(0).default(0),
  /** Further revisions, "slug:revision" separated by commas; three at most. */
  compare: z.string().max(300).default(''),
  configuration: z.string().max(80).default(''),
  loading: z.string().max(80).default(''),
  /** Calibrated, kt. 0 takes 1.5 stall speeds. */
  ias: number(0, 700).catch(0).default(0),
  height: number(-1000, 60_000).catch(0).default(0),
  class: z.enum(['', 'I', 'II-L', 'II-C', 'III', 'IV']).catch('').default(''),
  category: z.enum(['', 'A', 'B', 'C']).catch('').default(''),
  damper: z.enum(['off', 'on']).catch('off').default('off'),
  sweep: z
    .enum(['speed', 'height', ...DERIVATIVE_KEYS])
    .catch('speed')
    .default('speed'),
  shifts: shiftsText.catch({}).default({}),
  x: derivative.catch('Cn_beta').default('Cn_beta'),
  y: derivative.catch('Cl_beta').default('Cl_beta'),
  input: z.enum(['rudder', 'aileron', 'side-gust', 'yaw-gust', 'roll-gust']).catch('rudder').default('rudder'),
  shape: z.enum(['step', 'pulse', 'doublet', 'one-minus-cosine']).catch('doublet').default('doublet'),
  amplitude: number(-60, 60).catch(5).default(5),
  lasts: number(0.05, 30).catch(1).default(1),
  bode: z.enum(['rudder', 'aileron', 'side-gust', 'yaw-gust', 'roll-gust']).catch('rudder').default('rudder'),
  output: z.enum(['beta', 'p', 'r', 'phi']).catch('beta').default('beta'),
  failed: z.string().max(400).default(''),
  lever: number(0, 1).catch(1).default(1),
  feathered: z.enum(['no', 'yes']).catch('no').default('no'),
  quantity: z.enum(DISPERSION_QUANTITIES).catch('dutch-zeta').default('dutch-zeta'),
  draws: number(100, 20_000).int().catch(2000).default(2000),
  seed: number(0, 4_294_967_295).int().catch(7).default(7),
  study: z.string().max(60).default(''),
});
export type BenchState = z.output<typeof benchStateSchema>;

export const DEFAULT_STATE: BenchState = benchStateSchema.parse({});

/** Address members of a state; what equals the default is left out. */
export function toQuery(state: BenchState): Record<string, string> {
  const out: Record<string, string> = {};
  for (const [name, value] of Object.entries(state)) {
    const text = typeof value === 'object' ? shiftsToText(value) : String(value);
    const standard = Reflect.get(DEFAULT_STATE, name) as unknown; // a member of the same object type
    const standardText = typeof standard === 'object' ? '' : String(standard);
    if (text !== standardText) out[name] = text;
  }
  return out;
}

export function fromQuery(query: Record<string, unknown>): BenchState {
  const plain = Object.fromEntries(Object.entries(query).filter(([, value]) => typeof value === 'string'));
  const parsed = benchStateSchema.safeParse(plain);
  return parsed.success ? parsed.data : DEFAULT_STATE;
}

export function shiftsToText(shifts: BenchState['shifts']): string {
  return Object.entries(shifts)
    .filter(([, by]) => by !== 0)
    .map(([key, by]) => `${key}:${Number(by.toPrecision(6))}`)
    .join(',');
}

/** Compared revisions of a state's text; at most three. */
export function comparedRevisions(text: string): { slug: string; revision: number }[] {
  return text
    .split(',')
    .map((part) => {
      const [slug = '', revision = ''] = part.split(':');
      return { slug, revision: Number(revision) };
    })
    .filter((r) => r.slug !== '' && Number.isInteger(r.revision) && r.revision > 0)
    .slice(0, 3);
}
