/** Combinations of torsion choices: all of them, or a sample that covers them evenly. */
import type { Drive } from './drives';

/** How many combinations there are. */
export function countCombinations(drives: readonly Drive[]): number {
  return drives.reduce((product, { angles }) => product * angles.length, 1);
}

/** The combination with a number from 0 on, in mixed radix: one angle a drive, degrees. */
export function combination(drives: readonly Drive[], number: number): number[] {
  let rest = number;
  return drives.map(({ angles }) => {
    const choice = rest % angles.length;
    rest = Math.floor(rest / angles.length);
    return angles[choice];
  });
}

/**
 * The n-th combination of an additive recurrence on powers of the generalized golden ratio, whose points fill
 * the cube evenly in any number of dimensions (Kronecker sequences; Niederreiter, Random Number Generation and
 * Quasi-Monte Carlo Methods, 1992, chapter 3).
 */
export function spreadCombination(drives: readonly Drive[], n: number): number[] {
  const ratio = generalizedGoldenRatio(drives.length);
  return drives.map(({ angles }, d) => {
    const position = (0.5 + n * ratio ** -(d + 1)) % 1;
    return angles[Math.floor(position * angles.length)];
  });
}

/** The positive root of x^(d+1) = x + 1. */
function generalizedGoldenRatio(dimensions: number): number {
  let x = 1.5;
  for (let round = 0; round < 60; round++) x = (1 + x) ** (1 / (dimensions + 1));
  return x;
}
