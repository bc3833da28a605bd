/** Chart arithmetic: linear scales and round ticks. */

/** Maps a value of the domain to a length of the range; both run from the first to the second number. */
export function linearScale(
  [d0, d1]: readonly [number, number],
  [r0, r1]: readonly [number, number],
): (value: number) => number {
  const slope = d1 === d0 ? 0 : (r1 - r0) / (d1 - d0);
  return (value) => r0 + (value - d0) * slope;
}

/** Round values from 0 to at least `top`, about `count` steps of 1, 2 or 5 times a power of ten. */
export function roundTicks(top: number, count = 5): number[] {
  const raw = Math.max(top, 1e-6) / count;
  const power = 10 ** Math.floor(Math.log10(raw));
  const step = [1, 2, 5, 10].map((factor) => factor * power).find((size) => size >= raw)!;
  const steps = Math.ceil(top / step - 1e-9);
  return Array.from({ length: Math.max(1, steps) + 1 }, (_, n) =>
    Number((n * step).toPrecision(12)),
  );
}

/** The mark of a stationary point round the origin: a disc for a minimum, a diamond for a maximum. */
export function pointMark(kind: 'minimum' | 'maximum', size: number): string {
  if (kind === 'minimum') {
    return `M${-size} 0 A${size} ${size} 0 1 1 ${size} 0 A${size} ${size} 0 1 1 ${-size} 0 Z`;
  }
  const tip = 1.25 * size;
  return `M0 ${-tip} L${tip} 0 L0 ${tip} L${-tip} 0 Z`;
}
