/**
 * The row of the periodic table as MMFF94 counts it: hydrogen and helium 0, lithium to neon 1, and so on; ten times
 * the row for the transition metals.
 */
export function periodicRow(atomicNumber: number): number {
  if (atomicNumber <= 2) return 0;
  if (atomicNumber <= 10) return 1;
  if (atomicNumber <= 18) return 2;
  if (atomicNumber <= 36) return atomicNumber >= 21 && atomicNumber <= 30 ? 30 : 3;
  if (atomicNumber <= 54) return atomicNumber >= 39 && atomicNumber <= 48 ? 40 : 4;
  return atomicNumber >= 57 && atomicNumber <= 80 ? 50 : 5;
}
