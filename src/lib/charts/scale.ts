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
