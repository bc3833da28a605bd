/** Signs of permutations, on which every statement about handedness rests. */

/** True when sorting the values takes an odd number of swaps; the values must differ. */
export function isOddPermutation(values: readonly number[]): boolean {
  let odd = false;
  for (let i = 0; i < values.length; i++) {
    for (let j = i + 1; j < values.length; j++) if (values[i] > values[j]) odd = !odd;
  }
  return odd;
}
