/**
 * Elementary functions that give the same last bit in every JavaScript engine.
 *
 * The built-in sin, cos, tan, exp, log, pow, atan2 and asin differ between engines in their last bits, so a recording
 * would not repeat. Everything under `shared` takes them from here. `Math.sqrt` and `Math.abs` are exact by IEEE 754.
 */
import sinImpl from '@stdlib/math-base-special-sin';
import cosImpl from '@stdlib/math-base-special-cos';
import tanImpl from '@stdlib/math-base-special-tan';
import expImpl from '@stdlib/math-base-special-exp';
import lnImpl from '@stdlib/math-base-special-ln';
import powImpl from '@stdlib/math-base-special-pow';
import atan2Impl from '@stdlib/math-base-special-atan2';
import asinImpl from '@stdlib/math-base-special-asin';

export const sin: (x: number) => number = sinImpl;
export const cos: (x: number) => number = cosImpl;
export const tan: (x: number) => number = tanImpl;
export const exp: (x: number) => number = expImpl;
export const ln: (x: number) => number = lnImpl;
export const pow: (x: number, y: number) => number = powImpl;
export const atan2: (y: number, x: number) => number = atan2Impl;
export const asin: (x: number) => number = asinImpl;
export const PI = 3.141592653589793;
