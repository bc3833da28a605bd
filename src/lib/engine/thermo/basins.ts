/** Populations of the basins of a periodic profile, by integration and not by counting minima. */
import { GAS_CONSTANT, wrapDegrees } from '../units';
import type { PeriodicCurve } from './periodic-curve';

/** Integration step, degrees; profiles vary over tens of degrees. */
const STEP = 0.5;

/**
 * Populations along a profile in kcal/mol, p(φ) ∝ exp(-E(φ)/RT), integrated from each border to the next, temperature
 * in K. `borders` are the angles of the barriers, degrees, in any order; the result has one population for the basin that
 * begins at each border, in ascending order of the borders brought into (-180, 180]. They sum to 1. Without borders, or with
 * one, all is one basin.
 */
export function basinPopulations(
  curve: PeriodicCurve,
  borders: readonly number[],
  temperature: number,
): number[] {
  const ordered = borders.map(wrapDegrees).sort((a, b) => a - b);
  if (ordered.length < 2) return [1];
  const lowest = Math.min(...curve.values);
  const weight = (angle: number): number =>
    Math.exp(-(curve.at(angle) - lowest) / (GAS_CONSTANT * temperature));
  const integrals = ordered.map((from, i) => {
    const to = i + 1 < ordered.length ? ordered[i + 1] : ordered[0] + 360;
    return integrate(weight, from, to);
  });
  const sum = integrals.reduce((total, part) => total + part, 0);
  return integrals.map((part) => part / sum);
}

/** Simpson's rule. */
function integrate(f: (angle: number) => number, from: number, to: number): number {
  const pairs = Math.max(1, Math.ceil((to - from) / (2 * STEP)));
  const h = (to - from) / (2 * pairs);
  let sum = f(from) + f(to);
  for (let i = 1; i < 2 * pairs; i++) sum += (i % 2 === 1 ? 4 : 2) * f(from + i * h);
  return (sum * h) / 3;
}

/** Population average of a quantity along a profile: ⟨f⟩ = ∫ f(φ) p(φ) dφ; energies in kcal/mol, temperature in K. */
export function profileAverage(
  curve: PeriodicCurve,
  quantity: (angle: number) => number,
  temperature: number,
): number {
  const lowest = Math.min(...curve.values);
  const weight = (angle: number): number =>
    Math.exp(-(curve.at(angle) - lowest) / (GAS_CONSTANT * temperature));
  const weighted = integrate((angle) => weight(angle) * quantity(angle), -180, 180);
  return weighted / integrate(weight, -180, 180);
}
