/** What each kind of event does to a run. */
import type { Plant } from '../model/plant-types.ts';
import { DEG, KT } from '../units/constants.ts';
import type { EngineBook } from './engine-book.ts';
import { compassRad, pitchMode } from './plant-setup.ts';
import type { ScenarioEvent } from './scenario-format.ts';
import { scriptedInput } from './scripted-inputs.ts';
import type { ScriptedInput } from './scripted-inputs.ts';
import type { Signals } from './signals.ts';

/** The parts of a run that events act on. */
export interface EffectTargets {
  plant: Plant;
  engines: EngineBook;
  signals: Signals;
  scripted: ScriptedInput[];
  messages: { text: string; untilS: number }[];
  display: Record<string, 'normal' | 'failed' | 'frozen'>;
  requestFreeze(): void;
}

type Gust = Extract<ScenarioEvent, { kind: 'gust' }>;

/** Applies an event at the present tick. Engine names were checked against the airframe. */
export function applyEvent(event: ScenarioEvent, on: EffectTargets): void {
  const { plant, engines, signals } = on;
  const indexOf = (name: string): number => engines.startAircraft.engines.findIndex((engine) => engine.name === name);
  switch (event.kind) {
    case 'engine-failure':
      plant.failEngine(indexOf(event.engine), event.propeller);
      return engines.fail(indexOf(event.engine), event.propeller === 'feathered');
    case 'engine-partial':
      plant.failEnginePartial(indexOf(event.engine), event.fraction);
      return engines.failPartly(indexOf(event.engine), event.fraction);
    case 'engine-restore':
      plant.restoreEngine(indexOf(event.engine));
      return engines.restore(indexOf(event.engine));
    case 'feather':
      plant.featherEngine(indexOf(event.engine));
      return engines.feather(indexOf(event.engine));
    case 'lever':
      return plant.setLever(event.engine === 'all' ? 'all' : indexOf(event.engine), event.position, event.over_s);
    case 'gust':
      return plant.addGust(gustOf(event, signals.tasMps));
    case 'wind-change':
      return plant.changeWind(compassRad(event.windFrom_deg), event.wind_kt * KT, event.over_s);
    case 'turbulence':
      return plant.setTurbulence(event.level, event.over_s);
    case 'rudder-jam':
      return plant.jamRudder(event.at_deg === undefined ? undefined : event.at_deg * DEG);
    case 'aileron-jam':
      return plant.jamAileron(event.at_deg === undefined ? undefined : event.at_deg * DEG);
    case 'rudder-hardover':
      return plant.hardoverRudder(event.to === 'right' ? 1 : -1);
    case 'aileron-half':
      return plant.halveAileron();
    case 'controls-restore':
      return plant.restoreControls();
    case 'rudder-trim':
      return plant.setRudderTrim(event.deg * DEG, event.over_s);
    case 'input':
      on.scripted.push(scriptedInput(event, signals.tick));
      return;
    case 'yaw-damper':
      return plant.setYawDamper(event.on);
    case 'rudder-ratio':
      return plant.setRudderRatio(event.state);
    case 'pitch-mode':
      return plant.setPitchMode(pitchMode(event, { pathRad: signals.thetaRad, casMps: signals.casMps }));
    case 'configuration':
      return plant.setConfiguration(event.name);
    case 'display':
      on.display[event.indication] = event.state;
      return;
    case 'message':
      on.messages.push({ text: event.text, untilS: signals.timeS + event.duration_s });
      return;
    case 'freeze':
      return on.requestFreeze();
    case 'marker':
      return;
  }
}

/** A gust for the plant. A ramp by distance or a one-minus-cosine by time is turned at the present true airspeed. */
function gustOf(event: Gust, tasMps: number): Parameters<Plant['addGust']>[0] {
  const { axis, shape, gradientDistance_m: distance, over_s: over } = event;
  const peak =
    event.axis === 'lateral' ? (event.from === 'left' ? 1 : -1) * event.peak_kt * KT : event.peak_deg_s * DEG;
  if (shape === 'step') return { axis, shape, peak };
  if (shape === 'ramp') return { axis, shape, peak, overS: over ?? (distance ?? 0) / tasMps };
  return { axis, shape, peak, gradientDistanceM: distance ?? (over ?? 0) * tasMps };
}
