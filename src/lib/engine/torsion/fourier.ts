/** A torsion profile as a Fourier series, the form force fields use for torsions. */
import { toRadians } from '../units';

/** The series E(φ) = constant + Σ ½ V_n [1 + (-1)^(n+1) cos nφ] + Σ ½ S_n sin nφ, all in kcal/mol. */
export interface FourierSeries {
  readonly constant: number;
  /** V1, V2, … */
  readonly cosine: readonly number[];
  /** S1, S2, …; all zero for a profile that is its own mirror image. */
  readonly sine: readonly number[];
  /** Root mean square of what the series misses at the points, kcal/mol. */
  readonly residualRms: number;
}

/** The highest multiplicity fitted. */
const HIGHEST_ORDER = 6;

/**
 * Fits the series to a profile (degrees, kcal/mol) by least squares, up to V6 or to what the number of points carries.
 * `symmetric` leaves the sine terms out. Needs at least three points; throws plainly otherwise.
 */
export function fitFourier(
  angles: ArrayLike<number>,
  energies: ArrayLike<number>,
  symmetric: boolean,
): FourierSeries {
  if (angles.length < 3) throw new Error('a Fourier series needs at least three points');
  // A function that repeats after 360° sampled at n points shows no order above (n - 1) / 2 without ambiguity.
  const order = Math.min(HIGHEST_ORDER, Math.floor((angles.length - 1) / 2));
  const rows = Array.from(angles, (angle) => basis(angle, order, symmetric));
  const coefficients = leastSquares(rows, energies);
  let squares = 0;
  rows.forEach((row, i) => {
    const fitted = row.reduce((sum, value, n) => sum + value * coefficients[n], 0);
    squares += (energies[i] - fitted) ** 2;
  });
  const cosine = coefficients.slice(1, 1 + order);
  const sine = symmetric ? cosine.map(() => 0) : coefficients.slice(1 + order);
  return {
    constant: coefficients[0],
    cosine,
    sine,
    residualRms: Math.sqrt(squares / rows.length),
  };
}

/** The series' value at an angle in degrees, kcal/mol. */
export function fourierValue(series: FourierSeries, angle: number): number {
  const { constant, cosine, sine } = series;
  const row = basis(angle, cosine.length, false);
  return [constant, ...cosine, ...sine].reduce((sum, value, n) => sum + value * row[n], 0);
}

function basis(angle: number, order: number, symmetric: boolean): number[] {
  const phi = toRadians(angle);
  const row = [1];
  for (let n = 1; n <= order; n++) row.push(0.5 * (1 + (n % 2 === 1 ? 1 : -1) * Math.cos(n * phi)));
  if (!symmetric) for (let n = 1; n <= order; n++) row.push(0.5 * Math.sin(n * phi));
  return row;
}

/** Solves the normal equations by Cholesky's decomposition; at most 13 unknowns, near orthogonal. */
function leastSquares(rows: readonly number[][], values: ArrayLike<number>): number[] {
  const count = rows[0].length;
  const lower = Array.from({ length: count }, () => new Float64Array(count));
  const solution = new Array<number>(count).fill(0);
  for (let a = 0; a < count; a++) {
    for (let i = 0; i < rows.length; i++) solution[a] += rows[i][a] * values[i];
    for (let b = 0; b <= a; b++) {
      let sum = rows.reduce((total, row) => total + row[a] * row[b], 0);
      for (let c = 0; c < b; c++) sum -= lower[a][c] * lower[b][c];
      lower[a][b] = a === b ? Math.sqrt(sum) : sum / lower[b][b];
    }
  }
  for (let a = 0; a < count; a++) {
    for (let b = 0; b < a; b++) solution[a] -= lower[a][b] * solution[b];
    solution[a] /= lower[a][a];
  }
  for (let a = count - 1; a >= 0; a--) {
    for (let b = a + 1; b < count; b++) solution[a] -= lower[b][a] * solution[b];
    solution[a] /= lower[a][a];
  }
  return solution;
}
