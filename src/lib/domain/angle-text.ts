/** Angles as people read them. */

/** A torsion angle in (-180, 180] with some digits; what would be rounded to -180 is written as 180. */
export function angleText(angle: number, digits: number): string {
  const text = angle.toFixed(digits);
  return Number(text) === -180 || Number(text) === 0 ? text.replace('-', '') : text;
}
