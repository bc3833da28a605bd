/**
 * Line search by bracketing and safeguarded cubic interpolation (Nocedal and Wright,
 * Numerical Optimization, 2nd ed., algorithms 3.5 and 3.6), and with the approximate Wolfe conditions where the energy
 * change drowns in rounding (Hager and Zhang, SIAM J. Optim. 2005, 16, 170).
 */
import { dot } from './history';

/** A point with its energy and gradient, in whatever coordinates the direction has. */
export interface Point {
  x: Float64Array;
  gradient: Float64Array;
  energy: number;
}

const SUFFICIENT_DECREASE = 1e-4;
const CURVATURE = 0.9;
const LARGEST_GROWTH = 4;
const TRIALS = 20;
/** Relative rounding error to be expected of an energy. */
const ENERGY_NOISE = 1e-13;

/** What a line search found. */
export interface LineSearchResult {
  evaluations: number;
  /** False when no lower point was found. */
  lower: boolean;
}

/**
 * Searches from `start` along `direction`; `evaluate` computes the point at a step into `end`, where the point reached is
 * left. Tries `step` first and never goes beyond `largestStep`. Writes what it found to `result`.
 */
export function searchLine(
  evaluate: (step: number) => void,
  start: Point,
  direction: Float64Array,
  step: number,
  largestStep: number,
  end: Point,
  result: LineSearchResult,
): void {
  result.lower = true;
  const startSlope = dot(start.gradient, direction);
  const noise = ENERGY_NOISE * (1 + Math.abs(start.energy));
  let low = 0;
  let lowEnergy = start.energy;
  let lowSlope = startSlope;
  let high = 0;
  let highEnergy = 0;
  let highSlope = 0;
  let bracketed = false;
  let trial = Math.min(step, largestStep);

  for (let evaluations = 1; evaluations <= TRIALS; evaluations++) {
    evaluate(trial);
    result.evaluations = evaluations;
    const slope = dot(end.gradient, direction);
    const decreased = end.energy <= start.energy + SUFFICIENT_DECREASE * trial * startSlope;
    const drowned =
      end.energy <= start.energy + noise && slope <= (2 * SUFFICIENT_DECREASE - 1) * startSlope;
    const flat = Math.abs(slope) <= -CURVATURE * startSlope;
    if ((decreased || drowned) && flat) return;
    if (decreased && slope < 0 && trial >= largestStep) return;
    // A second energy is not spent on a flatter slope: the memory copes with any curvature it is told.
    if (decreased && evaluations > 1) return;

    // Keep the interval [low, high] around a point that satisfies the conditions; low is its better end.
    if (!(decreased || drowned) || !(end.energy < lowEnergy + noise)) {
      high = trial;
      highEnergy = end.energy;
      highSlope = slope;
      bracketed = true;
    } else {
      if (bracketed ? slope * (high - low) >= 0 : slope >= 0) {
        high = low;
        highEnergy = lowEnergy;
        highSlope = lowSlope;
        bracketed = true;
      }
      low = trial;
      lowEnergy = end.energy;
      lowSlope = slope;
    }
    trial = bracketed
      ? interpolate(low, lowEnergy, lowSlope, high, highEnergy, highSlope)
      : Math.min(LARGEST_GROWTH * trial, largestStep);
    if (bracketed && Math.abs(high - low) <= 1e-12 * Math.max(low, high)) break;
  }
  // The conditions were not met; a lower point is still worth having.
  result.lower = lowEnergy < start.energy;
  if (!result.lower) return;
  evaluate(low);
  result.evaluations++;
}

/** Minimum of the cubic through two points with slopes, kept well inside the interval. */
function interpolate(
  a: number,
  energyA: number,
  slopeA: number,
  b: number,
  energyB: number,
  slopeB: number,
): number {
  const width = b - a;
  const theta = slopeA + slopeB - (3 * (energyB - energyA)) / width;
  const root = Math.sqrt(Math.max(0, theta * theta - slopeA * slopeB)) * Math.sign(width);
  const fraction = 1 - (slopeB + root - theta) / (slopeB - slopeA + 2 * root);
  const safe = Number.isFinite(fraction) ? Math.min(0.9, Math.max(0.1, fraction)) : 0.5;
  return a + safe * width;
}
