/** The measure of a criterion. */
import { wrapPi } from '../../units/angles.ts';
import { EXPRESSION_NAMES, MADE_SIGNAL, STATE_SIGNAL } from '../expression/names.ts';
import type { SignalName } from '../expression/names.ts';
import { compileQuantity } from '../expression/expression.ts';
import { UNITS } from '../expression/units.ts';
import type { ScenarioCriterion } from '../scenario-format.ts';
import { TimeIn } from './durations.ts';
import { BankDeadSide, GreatestChange, GreatestMagnitude, GreatestOfExpression, GreatestSignal } from './extremes.ts';
import type { Measure } from './measure.ts';
import { FirstCorrectPedal, PedalReversals, WrongPedalTime, YawArrested } from './reaction.ts';
import { ClimbRate, FeatheredWithin, LeverReduced, NoseLowered, SpeedRegained, WrongEngine } from './recovery.ts';
import { AtTouchdown } from './touchdown.ts';

/** A fresh measure. The criterion has passed the schema's rules; an expression that does not compile is a fault of ours. */
export function createMeasure(criterion: ScenarioCriterion): Measure {
  switch (criterion.measure) {
    case 'heading-deviation':
      return new GreatestChange('psiRad', false);
    case 'track-deviation':
      return new GreatestMagnitude((s) => s.trackErrorRad);
    case 'track-offset':
      return new GreatestMagnitude((s) => s.trackOffsetM);
    case 'bank':
      return new GreatestSignal('phiRad');
    case 'bank-dead-side':
      return new BankDeadSide();
    case 'sideslip':
      return new GreatestSignal('betaRad');
    case 'yaw-rate':
      return new GreatestSignal('rRadS');
    case 'roll-rate':
      return new GreatestSignal('pRadS');
    case 'ball':
      return new GreatestSignal('ballWidths');
    case 'height-loss':
      return new GreatestChange('heightM', true);
    case 'speed-loss':
      return new GreatestChange('casMps', true);
    case 'speed-deviation':
      return new GreatestMagnitude((s) => s.v[MADE_SIGNAL.casMps] - s.startCasMps);
    case 'first-correct-pedal':
      return new FirstCorrectPedal();
    case 'wrong-pedal-time':
      return new WrongPedalTime();
    case 'yaw-arrested':
      return new YawArrested();
    case 'pedal-force':
      return new GreatestMagnitude((s) => s.full().pedalForceN);
    case 'rudder-saturation-time':
      return new TimeIn((s) => s.full().rudderSaturated);
    case 'pedal-reversals':
      return new PedalReversals();
    case 'lever-reduced':
      return new LeverReduced();
    case 'nose-lowered':
      return new NoseLowered();
    case 'speed-regained':
      return new SpeedRegained((criterion.value ?? 0) * UNITS[criterion.unit ?? 'kt'].factor);
    case 'wrong-engine':
      return new WrongEngine();
    case 'feathered-within':
      return new FeatheredWithin();
    case 'climb-rate':
      return new ClimbRate();
    case 'touchdown-crab':
      return new AtTouchdown((s) => Math.abs(wrapPi(s.x[STATE_SIGNAL.psiRad] - s.full().trackRad)));
    case 'touchdown-drift':
      return new AtTouchdown((s) => Math.abs(s.acrossMps));
    case 'touchdown-bank':
      return new AtTouchdown((s) => Math.abs(s.x[STATE_SIGNAL.phiRad]));
    case 'touchdown-offset':
      return new AtTouchdown((s) => Math.abs(s.trackOffsetM));
    case 'touchdown-sink':
      return new AtTouchdown((s) => -s.full().verticalSpeedMps);
    case 'outside-data-time':
      return new TimeIn((s) => s.full().outsideData);
    case 'stall-warning-time':
      return new TimeIn((s) => s.full().stallWarning);
    case 'fin-stall-time':
      return new TimeIn((s) => s.full().finStalled);
    case 'expression':
      return expressionMeasure(criterion);
  }
}

function expressionMeasure(criterion: ScenarioCriterion): Measure {
  const compiled = compileQuantity(criterion.expression ?? '');
  if (!compiled.ok) throw new Error(`criterion ${criterion.id}: ${compiled.problem.message}`);
  return new GreatestOfExpression(compiled.quantity);
}

/** Signals a criterion reads that are worked out only when somebody needs them. */
export function signalsNeeded({ measure, expression }: ScenarioCriterion): SignalName[] {
  if (measure === 'ball') return ['ballWidths'];
  if (measure.startsWith('speed-')) return ['casMps'];
  const compiled = measure === 'expression' ? compileQuantity(expression ?? '') : null;
  return compiled?.ok ? compiled.quantity.names.map((name) => EXPRESSION_NAMES[name].signal) : [];
}
