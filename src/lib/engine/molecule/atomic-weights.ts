/** Masses of atoms, g/mol. */

/**
 * Standard atomic weights by atomic number, abridged values (IUPAC 2021, Pure Appl. Chem. 2022, 94, 573); for elements
 * without a standard weight the mass number of a long-lived isotope. Entry 0 is unused.
 */
// prettier-ignore
export const STANDARD_ATOMIC_WEIGHTS: readonly number[] = [
  0, 1.008, 4.0026, 6.94, 9.0122, 10.81, 12.011, 14.007, 15.999, 18.998, 20.18,
  22.99, 24.305, 26.982, 28.085, 30.974, 32.06, 35.45, 39.95, 39.098, 40.078,
  44.956, 47.867, 50.942, 51.996, 54.938, 55.845, 58.933, 58.693, 63.546, 65.38,
  69.723, 72.63, 74.922, 78.971, 79.904, 83.798, 85.468, 87.62, 88.906, 91.224,
  92.906, 95.95, 97, 101.07, 102.91, 106.42, 107.87, 112.41, 114.82, 118.71,
  121.76, 127.6, 126.9, 131.29, 132.91, 137.33, 138.91, 140.12, 140.91, 144.24,
  145, 150.36, 151.96, 157.25, 158.93, 162.5, 164.93, 167.26, 168.93, 173.05,
  174.97, 178.49, 180.95, 183.84, 186.21, 190.23, 192.22, 195.08, 196.97, 200.59,
  204.38, 207.2, 208.98, 209, 210, 222, 223, 226, 227, 232.04,
  231.04, 238.03, 237, 244, 243, 247, 247, 251, 252, 257,
  258, 259, 262, 267, 270, 269, 270, 270, 278, 281,
  281, 285, 286, 289, 289, 293, 293, 294,
];

/** Masses of labelled isotopes in use (AME2020, Chin. Phys. C 2021, 45, 030003) by atomic number and mass number. */
const ISOTOPE_MASSES: Readonly<Record<string, number>> = {
  '1-1': 1.00783,
  '1-2': 2.0141,
  '1-3': 3.01605,
  '6-11': 11.01143,
  '6-12': 12,
  '6-13': 13.00335,
  '6-14': 14.00324,
  '7-14': 14.00307,
  '7-15': 15.00011,
  '8-16': 15.99491,
  '8-17': 16.99913,
  '8-18': 17.99916,
  '9-18': 18.00094,
};

/** Mass of an atom: of its isotope where one is named (the mass number where no better one is at hand). */
export function atomicMass(atomicNumber: number, massNumber: number): number {
  if (massNumber === 0) return STANDARD_ATOMIC_WEIGHTS[atomicNumber];
  return ISOTOPE_MASSES[`${atomicNumber}-${massNumber}`] ?? massNumber;
}
