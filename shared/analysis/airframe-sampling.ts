import { NumericsError } from '../numerics/errors.ts';
import { createStream } from '../numerics/random.ts';
import type { Airframe } from '../model/airframe-schema.ts';

/** One number of an airframe that is drawn, with its uncertainty. */
export interface UncertainField {
  /** JSON Pointer. */
  field: string;
  /** The pointer's member names. */
  path: readonly string[];
  value: number;
  /** 2σ; per cent of the value. */
  uncertaintyPct: number;
}

/** Draws are cut at this many σ. */
const CUT_SIGMA = 3;
const MAX_REDRAWS = 200;
/** A factor never falls below this, so that masses and areas stay positive under absurd uncertainties. */
const LEAST_FACTOR = 0.05;

/** Members that "*" and group pointers cover; geometry, limits and break points are exact unless named themselves. */
const COVERED: readonly RegExp[] = [
  /^\/mass\/(?:mass_kg|Ixx_kgm2|Iyy_kgm2|Izz_kgm2|Ixz_kgm2)$/u,
  /^\/configurations\/\d+\/(?:CLmax|CD0|kInduced|CD_beta2|CL_alpha_per_rad)$/u,
  /^\/configurations\/\d+\/derivatives\/\d+\/C[Yln]_(?:beta|p|r|da|dr)$/u,
  /^\/fin\/(?:liftSlope_per_rad|sidewash|rudderTau|stallAngle_deg|stallAngleWithDorsal_deg)$/u,
  /^\/engines\/\d+\/(?:staticThrust_N|power_W|bladeOffset_m|slipstreamLift|torqueArm_m|swirlArm_m|windmillDragArea_m2|featheredDragArea_m2)$/u,
];

/**
 * The numbers of an airframe that are uncertain, with the uncertainty that counts for each.
 *
 * The source with the longest pointer that leads to the number wins; "*" is the shortest. A pointer to the number itself
 * makes any number uncertain; a group or "*" covers mass, derivatives, drag, CLmax, fin and engine data.
 *
 * @param airframe  Parsed airframe.
 * @returns         Fields in the order of the file; empty when no uncertainty is stated.
 * @throws          Nothing.
 * @sign            none
 * @source          Flight model, airframe data: uncertainty_pct means 2σ.
 */
export function uncertainFields(airframe: Airframe): UncertainField[] {
  const sources = (airframe.sources ?? []).filter((source) => source.uncertainty_pct !== undefined);
  const out: UncertainField[] = [];
  if (sources.length === 0) return out;
  const visit = (node: unknown, pointer: string, path: readonly string[]): void => {
    if (typeof node === 'number') {
      let best = -1;
      let pct = 0;
      for (const source of sources) {
        const exact = source.field === pointer;
        const covers = source.field === '*' || pointer.startsWith(`${source.field}/`);
        const length = source.field === '*' ? 0 : source.field.length;
        if (length > best && (exact || (covers && COVERED.some((pattern) => pattern.test(pointer))))) {
          best = length;
          pct = source.uncertainty_pct ?? 0;
        }
      }
      if (best >= 0 && pct > 0 && node !== 0) out.push({ field: pointer, path, value: node, uncertaintyPct: pct });
      return;
    }
    if (typeof node !== 'object' || node === null) return;
    for (const [key, child] of Object.entries(node)) {
      if (pointer === '' && key === 'sources') continue;
      visit(child, `${pointer}/${key.replaceAll('~', '~0').replaceAll('/', '~1')}`, [...path, key]);
    }
  };
  visit(airframe, '', []);
  return out;
}

/**
 * One draw of an airframe: each uncertain number times a normal factor, independent, cut at 3σ.
 *
 * Each number has a stream of its own by seed, draw and pointer: another uncertain number changes no other draw.
 *
 * @param airframe  Parsed airframe; not changed.
 * @param fields    Its uncertain fields (`uncertainFields`).
 * @param seed      Seed.
 * @param draw      Number of the draw, 0, 1, 2 …
 * @returns         A fresh airframe.
 * @throws {NumericsError} bad-argument when the draw breaks Ixx·Izz > Ixz².
 * @sign            none
 * @source          Flight model, airframe data.
 */
export function drawAirframe(
  airframe: Airframe,
  fields: readonly UncertainField[],
  seed: number,
  draw: number,
): Airframe {
  const copy = structuredCloneOf(airframe);
  for (const { field, path, value, uncertaintyPct } of fields) {
    const stream = createStream(seed, `${draw}${field}`);
    let z = stream.normal();
    for (let i = 0; i < MAX_REDRAWS && Math.abs(z) > CUT_SIGMA; i++) z = stream.normal();
    const factor = Math.max(LEAST_FACTOR, 1 + (uncertaintyPct / 200) * z);
    write(copy, path, value * factor);
  }
  const { Ixx_kgm2, Izz_kgm2, Ixz_kgm2 } = copy.mass;
  if (!(Ixx_kgm2 * Izz_kgm2 > Ixz_kgm2 * Ixz_kgm2)) {
    throw new NumericsError('bad-argument', `draw ${draw} has moments of inertia that no body has`);
  }
  return copy;
}

/** A deep copy of plain data; the shape is the argument's own. */
function structuredCloneOf(airframe: Airframe): Airframe {
  const clone = (node: unknown): unknown => {
    if (Array.isArray(node)) return node.map(clone);
    if (typeof node !== 'object' || node === null) return node;
    return Object.fromEntries(Object.entries(node).map(([key, child]) => [key, clone(child)]));
  };
  // The copy has the very members of the argument, so it has its type.
  return clone(airframe) as Airframe;
}

function write(root: object, path: readonly string[], value: number): void {
  let at: object = root;
  for (let i = 0; i + 1 < path.length; i++) {
    const next: unknown = Reflect.get(at, path[i]);
    if (typeof next !== 'object' || next === null) return;
    at = next;
  }
  Reflect.set(at, path[path.length - 1], value);
}
