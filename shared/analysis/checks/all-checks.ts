import { airCases } from './air-checks.ts';
import { controlSpeedCases } from './control-speed-checks.ts';
import { shippedControlSpeedCases } from './control-speed-facts.ts';
import { criteriaCases } from './criteria-checks.ts';
import { dimensionalCases } from './dimensional-checks.ts';
import { etkinCases } from './etkin-checks.ts';
import { finCases } from './fin-checks.ts';
import { modesCases } from './modes-checks.ts';
import { practiceCases } from './practice-checks.ts';
import type { ShippedAirframes } from './practice-checks.ts';
import type { PublishedCase } from './published-case.ts';
import { responseCases } from './response-checks.ts';
import { trapCases } from './trap-checks.ts';

/**
 * Every published case and fact of common practice, in the order in which people read them.
 *
 * @param airframes  The shipped airframes, parsed; facts of common practice are shown on them.
 * @returns          Cases with unique ids; `runCheck` computes one.
 * @throws           Nothing; a case that cannot be computed fails by itself.
 * @sign             none
 * @source           Each case's own.
 */
export function allChecks(airframes: ShippedAirframes): PublishedCase[] {
  return inOrder([...shippedControlSpeedCases(airframes), ...practiceCases(airframes)]);
}

/**
 * The cases that need no airframe: published values, criteria, air, estimates.
 *
 * @returns  Cases as `allChecks` gives them, without those shown on the shipped airframes.
 * @throws   Nothing.
 * @sign     none
 * @source   Each case's own.
 */
export function publishedChecks(): PublishedCase[] {
  return inOrder([]);
}

function inOrder(onShippedAirframes: PublishedCase[]): PublishedCase[] {
  return [
    ...etkinCases(),
    ...modesCases(),
    ...dimensionalCases(),
    ...trapCases(),
    ...responseCases(),
    ...controlSpeedCases(),
    ...onShippedAirframes,
    ...criteriaCases(),
    ...airCases(),
    ...finCases(),
  ];
}
