/** The top of a barrier along a relaxed profile. */
import type { Control } from '../control';
import { turnBetween, wrapDegrees } from '../units';
import { findLineMaximum } from './line-maximum';
import type { ProfileSample } from './scan-result';
import type { TorsionDrive } from './torsion-drive';

/** Degrees to which a maximum is found. */
const ANGLE_TOLERANCE = 0.2;
/** kcal/mol/Å; the profile's own noise must stay below what a fifth of a degree changes. */
const GRADIENT_RMS = 0.003;
const MAX_EVALUATIONS = 600;

/**
 * Refines the highest of some samples, given upwards in angle over `span` degrees; the first and last are the minima on
 * either side and no candidates. Every new angle is relaxed from the known geometries on both its sides, and the lower counts.
 * Null when nothing between the minima converges.
 */
export async function refineMaximum(
  drive: TorsionDrive,
  samples: readonly ProfileSample[],
  span: number,
  control: Control,
): Promise<ProfileSample | null> {
  const origin = samples[0].angle;
  /** Samples by degrees from the first. */
  const known = samples.map((sample, n) => ({
    at:
      n === samples.length - 1
        ? span
        : n === 0
          ? 0
          : (turnBetween(origin, sample.angle) + 360) % 360,
    sample,
  }));
  known.sort((a, b) => a.at - b.at);

  const evaluate = async (at: number): Promise<number> => {
    const right = known.findIndex((other) => other.at > at);
    let best: ProfileSample | null = null;
    for (const { sample } of known.slice(right - 1, right + 1)) {
      const angle = wrapDegrees(origin + at);
      const settings = { gradientRms: GRADIENT_RMS, maxEvaluations: MAX_EVALUATIONS };
      const held = await drive.relax(sample.coordinates, [angle], settings, control);
      if (!held.converged || (best && best.energy <= held.energy)) continue;
      best = { ...held, angle };
    }
    // An angle that cannot be relaxed is never the top.
    if (!best) return -Infinity;
    known.splice(right, 0, { at, sample: best });
    return best.energy;
  };

  if (known.length === 2) await evaluate(span / 2);
  const tops = known.slice(1, -1);
  if (tops.length === 0) return null;
  const top = tops.reduce((a, b) => (b.sample.energy > a.sample.energy ? b : a));
  const place = known.indexOf(top);
  const bracket = [known[place - 1], top, known[place + 1]].map(({ at, sample }) => ({
    at,
    value: sample.energy,
  }));
  if (top.sample.energy >= Math.max(bracket[0].value, bracket[2].value)) {
    const [left, middle, right] = bracket;
    const maximum = await findLineMaximum(evaluate, [left, middle, right], ANGLE_TOLERANCE);
    const found = known.find(({ at }) => at === maximum.at);
    if (found) return found.sample;
  }
  return top.sample;
}
