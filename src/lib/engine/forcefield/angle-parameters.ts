/** Angle-bending parameters, from the table or by the empirical rules (Halgren, J. Comput. Chem. 1996, 17, 553 and 616). */
import type { BondParameters } from './bond-parameters';
import { tableKey } from './parameter-table';
import type { AtomProperties, Parameters } from './parameters';
import { toRadians } from '../units';

export interface AngleParameters {
  /** degrees */
  readonly angle: number;
  /** mdyn Å/rad² */
  readonly force: number;
}

/** Z and C of the empirical rule by atomic number (part V, table III); C is given for elements that can be a vertex. */
const ANGLE_FACTORS: Readonly<Record<number, { z: number; c?: number }>> = {
  1: { z: 1.395 },
  6: { z: 2.494, c: 1.016 },
  7: { z: 2.711, c: 1.113 },
  8: { z: 3.045, c: 1.337 },
  9: { z: 2.847 },
  14: { z: 2.35, c: 0.811 },
  15: { z: 2.35, c: 1.068 },
  16: { z: 2.98, c: 1.249 },
  17: { z: 2.909, c: 1.078 },
  35: { z: 3.017 },
  53: { z: 3.086 },
};

/** What the rules need to know of an angle i-j-k besides its types. */
export interface AngleSetting {
  readonly angleClass: number;
  readonly ringSize: 0 | 3 | 4;
  readonly bondIJ: BondParameters;
  readonly bondJK: BondParameters;
}

/**
 * Parameters of the angle between types i-j-k: the table with i and k stepped down to ever more general types; the
 * force constant by rule where the table leaves it open, and the angle too where the table has none. Undefined for
 * elements that the rules do not cover.
 */
export function angleParameters(
  parameters: Parameters,
  i: number,
  j: number,
  k: number,
  setting: AngleSetting,
): AngleParameters | undefined {
  const row = findAngle(parameters, setting.angleClass, i, j, k);
  if (row && row[0] !== 0) return { force: row[0], angle: row[1] };
  const vertex = parameters.properties.get(j)!;
  const angle = row ? row[1] : estimateAngle(vertex, setting.ringSize);
  const elements = [i, j, k].map((type) => parameters.properties.get(type)!.atomicNumber);
  const force = estimateForce(elements, angle, setting);
  return force === undefined ? undefined : { force, angle };
}

/** Steps 1-1-1, 2-2-2, 3-2-3, 4-2-4 and 5-2-5 of the table of equivalences. */
function findAngle(
  parameters: Parameters,
  angleClass: number,
  i: number,
  j: number,
  k: number,
): readonly number[] | undefined {
  const outer = [i, k].map((type) => parameters.equivalents.get(tableKey(type))!);
  const vertex = parameters.equivalents.get(tableKey(j))!;
  for (let level = 0; level < 5; level++) {
    const ends = [outer[0][level], outer[1][level]].sort((a, b) => a - b);
    const middle = vertex[Math.min(level, 1)];
    const row = parameters.angles.get(tableKey(angleClass, ends[0], middle, ends[1]));
    if (row) return row;
  }
  return undefined;
}

/** Reference angle in degrees from the vertex alone (part V, "empirical rules for angle bending"). */
export function estimateAngle(vertex: AtomProperties, ringSize: 0 | 3 | 4): number {
  if (ringSize === 3) return 60;
  if (ringSize === 4) return 90;
  if (vertex.coordination === 4) return 109.45;
  if (vertex.coordination === 2) {
    if (vertex.atomicNumber === 8) return 105;
    if (vertex.atomicNumber > 10) return 95;
    if (vertex.linear) return 180;
  }
  if (vertex.coordination === 3 && vertex.valence === 3 && vertex.multipleBond === 0) {
    return vertex.atomicNumber === 7 ? 107 : 92;
  }
  return 120;
}

/**
 * k = β Z_i C_j Z_k / ((r_ij + r_jk) θ² e^(2D)), D = (r_ij − r_jk)²/(r_ij + r_jk)², θ in radians; β = 1.75, times 0.85 in
 * four- and 0.05 in three-membered rings.
 */
function estimateForce(
  [i, j, k]: readonly number[],
  angle: number,
  { ringSize, bondIJ, bondJK }: AngleSetting,
): number | undefined {
  const zI = ANGLE_FACTORS[i]?.z;
  const cJ = ANGLE_FACTORS[j]?.c;
  const zK = ANGLE_FACTORS[k]?.z;
  if (zI === undefined || cJ === undefined || zK === undefined) return undefined;
  const beta = ringSize === 3 ? 1.75 * 0.05 : ringSize === 4 ? 1.75 * 0.85 : 1.75;
  const sum = bondIJ.length + bondJK.length;
  const skew = ((bondIJ.length - bondJK.length) / sum) ** 2;
  return (beta * zI * cJ * zK) / (sum * toRadians(angle) ** 2 * Math.exp(2 * skew));
}
