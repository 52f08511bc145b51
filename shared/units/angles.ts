const PI = 3.141592653589793;
const TWO_PI = 6.283185307179586;

/** The same direction in (−π, π]; rad. A non-finite angle stays what it is. */
export function wrapPi(angleRad: number): number {
  const turned = angleRad - TWO_PI * Math.ceil((angleRad - PI) / TWO_PI);
  return turned > PI ? PI : turned;
}

/** The same direction in [0, 2π); rad. A non-finite angle stays what it is. */
export function wrap2Pi(angleRad: number): number {
  const turned = angleRad - TWO_PI * Math.floor(angleRad / TWO_PI);
  return turned >= TWO_PI || turned < 0 ? 0 : turned;
}
