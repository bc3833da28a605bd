/** The highest point of a function of one variable inside a bracket. */

export interface Sample {
  readonly at: number;
  readonly value: number;
}

/** Part of the larger interval at which a golden-section step is laid. */
const GOLDEN = (3 - Math.sqrt(5)) / 2;
const MOST_STEPS = 40;

/**
 * Narrows a bracket, left.at < top.at < right.at with `top` the highest, until its longer arm is at most
 * `tolerance`, or a parabola's top has not moved by more than half of that twice; returns the highest sample. Parabolic
 * steps where they land well inside, golden sections otherwise (Brent, Algorithms for Minimization Without Derivatives,
 * 1973, chapter 5), so a kink costs more steps but is found as well.
 */
export async function findLineMaximum(
  evaluate: (at: number) => Promise<number>,
  bracket: readonly [left: Sample, top: Sample, right: Sample],
  tolerance: number,
): Promise<Sample> {
  let [left, top, right] = bracket;
  let settled = 0;
  for (let step = 0; step < MOST_STEPS && settled < 2; step++) {
    if (Math.max(top.at - left.at, right.at - top.at) <= tolerance) break;
    const at = nextPlace(left, top, right, tolerance, step);
    const sample = { at, value: await evaluate(at) };
    settled = Math.abs(at - top.at) <= tolerance / 2 ? settled + 1 : 0;
    if (sample.value > top.value) {
      if (at < top.at) right = top;
      else left = top;
      top = sample;
    } else if (at < top.at) left = sample;
    else right = sample;
  }
  return top;
}

function nextPlace(
  left: Sample,
  top: Sample,
  right: Sample,
  tolerance: number,
  step: number,
): number {
  const before = top.at - left.at;
  const after = right.at - top.at;
  const rise = (top.value - left.value) / before;
  const fall = (top.value - right.value) / after;
  // The parabola through the three samples has its top this far from the middle one.
  const shift =
    (rise * after * after - fall * before * before) / (2 * (rise * after + fall * before));
  const least = tolerance / 4;
  const isInside = shift > -before + least && shift < after - least;
  // Every fourth step halves the longer arm, whatever the parabola says.
  if (isInside && step % 4 !== 3) {
    if (Math.abs(shift) >= least) return top.at + shift;
    return top.at + (after > before ? least : -least);
  }
  return after > before ? top.at + GOLDEN * after : top.at - GOLDEN * before;
}
