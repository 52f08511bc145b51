import { G0 } from '../units/constants.ts';
import { cos, sin } from '../numerics/elementary.ts';
import { solve3Into } from '../numerics/solve-linear.ts';
import type { Aircraft } from '../model/aircraft.ts';
