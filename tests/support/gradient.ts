/** Checks of analytic gradients against central differences. */
import type { EnergyTerm } from '$lib/engine/energy-term';

/** Displacement for the differences, Å; their own error is about its square times the third derivative. */
const STEP = 1e-5;

/** The gradient that a term adds, kcal/mol/Å. */
export function gradientOf(term: EnergyTerm, x: Float64Array): Float64Array {
  const gradient = new Float64Array(x.length);
  term(x, gradient);
  return gradient;
}

/** The gradient by central differences of the energy. */
export function differenceGradient(
  term: EnergyTerm,
  x: Float64Array,
  step: number = STEP,
): Float64Array {
  const unused = new Float64Array(x.length);
  const moved = x.slice();
  return x.map((value, a) => {
    moved[a] = value + step;
    const ahead = term(moved, unused);
    moved[a] = value - step;
    const behind = term(moved, unused);
    moved[a] = value;
    return (ahead - behind) / (2 * step);
  });
}

/** Largest difference between analytic and difference gradient, relative to the largest component (at least 1). */
export function gradientError(term: EnergyTerm, x: Float64Array, step: number = STEP): number {
  const analytic = gradientOf(term, x);
  const expected = differenceGradient(term, x, step);
  const scale = Math.max(1, ...expected.map(Math.abs));
  return Math.max(...analytic.map((value, a) => Math.abs(value - expected[a]))) / scale;
}
