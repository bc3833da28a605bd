/** Lays a molecule's interactions out as the records the energy program reads. */
import type { Dielectric } from '../forcefield';
import type { Interactions } from '../interactions';
import { KCAL_PER_MDYN_ANGSTROM, RADIANS_PER_DEGREE } from '../terms/constants';
import { COULOMB } from '../terms/electrostatic';
import { bondedParts } from './energy-program';
import { NONBONDED_BYTES } from './nonbonded-part';

export interface Records {
  /** All records; offsets of atoms are 32-bit integers in the same bytes. */
  readonly numbers: Float64Array;
  /** Where the bonds, angles, out-of-plane angles and torsions end, in bytes. */
  readonly ends: readonly [number, number, number, number];
}

const BYTES_PER_NUMBER = 8;

/** Lays out everything but the linear angles, which are rare and computed by their plain term. */
export function layOutRecords(
  atomCount: number,
  interactions: Interactions,
  { constant }: Dielectric,
): Records {
  const { bonds, angles, outOfPlanes, torsions, vanDerWaals, electrostatics } = interactions;
  const bent = Array.from(angles.linear.keys()).filter((n) => angles.linear[n] === 0);
  const sections = [
    section(bonds.atoms, 2, range(bonds.force.length), bondedParts.bonds.bytes, 2, [
      (n) => bonds.length[n],
      (n) => KCAL_PER_MDYN_ANGSTROM * bonds.force[n],
    ]),
    section(angles.atoms, 3, bent, bondedParts.angles.bytes, 4, angleConstants(interactions)),
    section(
      outOfPlanes.atoms,
      4,
      range(outOfPlanes.force.length),
      bondedParts.outOfPlanes.bytes,
      4,
      [(n) => KCAL_PER_MDYN_ANGSTROM * outOfPlanes.force[n]],
    ),
    section(torsions.atoms, 4, range(torsions.v1.length), bondedParts.torsions.bytes, 4, [
      (n) => torsions.v1[n] / 2,
      (n) => torsions.v2[n] / 2,
      (n) => torsions.v3[n] / 2,
    ]),
    nonbondedRecords(atomCount, vanDerWaals, electrostatics, COULOMB / constant),
  ];
  const numbers = new Float64Array(sections.reduce((sum, { length }) => sum + length, 0));
  const ends: number[] = [];
  let filled = 0;
  for (const records of sections) {
    numbers.set(records, filled);
    filled += records.length;
    ends.push(filled * BYTES_PER_NUMBER);
  }
  return { numbers, ends: [ends[0], ends[1], ends[2], ends[3]] };
}

function range(length: number): number[] {
  return Array.from({ length }, (_, n) => n);
}

/** Angle, bending constant and the stretch-bend that goes with it, where there is one. */
function angleConstants({ angles, stretchBends }: Interactions): ((n: number) => number)[] {
  const keyOf = (atoms: Int32Array, n: number): string => atoms.subarray(3 * n, 3 * n + 3).join();
  const angleOf = new Map(range(angles.angle.length).map((n) => [keyOf(angles.atoms, n), n]));
  const stretchBendOf = new Map<number, number>();
  for (let s = 0; s < stretchBends.angle.length; s++) {
    const n = angleOf.get(keyOf(stretchBends.atoms, s));
    if (n === undefined || angles.angle[n] !== stretchBends.angle[s]) {
      throw new Error('a stretch-bend interaction has no angle of its own');
    }
    stretchBendOf.set(n, s);
  }
  const coupling =
    (values: Float64Array, scale: number) =>
    (n: number): number => {
      const s = stretchBendOf.get(n);
      return s === undefined ? 0 : scale * values[s];
    };
  return [
    (n) => RADIANS_PER_DEGREE * angles.angle[n],
    (n) => KCAL_PER_MDYN_ANGSTROM * angles.force[n],
    coupling(stretchBends.lengthIJ, 1),
    coupling(stretchBends.lengthKJ, 1),
    coupling(stretchBends.forceIJK, KCAL_PER_MDYN_ANGSTROM),
    coupling(stretchBends.forceKJI, KCAL_PER_MDYN_ANGSTROM),
  ];
}

/**
 * Records of two interactions each: room for the offsets of `slots` atoms, then the constants. An odd last one stands beside a
 * copy of its atoms whose constants are all zero.
 */
function section(
  atoms: Int32Array,
  stride: number,
  chosen: readonly number[],
  bytes: number,
  slots: number,
  constants: readonly ((n: number) => number)[],
): Float64Array {
  const numbersPerRecord = bytes / BYTES_PER_NUMBER;
  const numbers = new Float64Array(Math.ceil(chosen.length / 2) * numbersPerRecord);
  const integers = new Int32Array(numbers.buffer);
  for (let m = 0; m < 2 * Math.ceil(chosen.length / 2); m++) {
    const n = chosen[Math.min(m, chosen.length - 1)];
    const start = (m >> 1) * numbersPerRecord;
    const lane = m & 1;
    for (let a = 0; a < stride; a++) {
      integers[2 * (start + a) + lane] = BYTES_PER_NUMBER * atoms[stride * n + a];
    }
    if (m >= chosen.length) continue;
    constants.forEach((value, c) => (numbers[start + slots + 2 * c + lane] = value(n)));
  }
  return numbers;
}

/** The records of all pairs in the order in which the program meets them. */
function nonbondedRecords(
  atomCount: number,
  { atoms, radius, depth }: Interactions['vanDerWaals'],
  { atoms: chargedAtoms, chargeProduct }: Interactions['electrostatics'],
  coulomb: number,
): Float64Array {
  const numbersPerRecord = NONBONDED_BYTES / BYTES_PER_NUMBER;
  const rowStarts = new Int32Array(atomCount);
  for (let i = 1; i < atomCount; i++) rowStarts[i] = rowStarts[i - 1] + ((atomCount - i + 1) >> 1);
  const numbers = new Float64Array(rowStarts[atomCount - 1] * numbersPerRecord);
  // A radius of 1 Å keeps the pairs without energy finite.
  for (let n = 0; n < numbers.length; n += numbersPerRecord) {
    numbers.fill(0.07, n, n + 2);
    numbers.fill(0.12, n + 2, n + 4);
  }
  const place = (i: number, j: number): number =>
    (rowStarts[i] + ((j - i - 1) >> 1)) * numbersPerRecord + ((j - i - 1) & 1);
  for (let n = 0; n < radius.length; n++) {
    const start = place(atoms[2 * n], atoms[2 * n + 1]);
    numbers[start] = 0.07 * radius[n];
    numbers[start + 2] = 0.12 * radius[n] ** 7;
    numbers[start + 4] = depth[n] * (1.07 * radius[n]) ** 7;
  }
  for (let n = 0; n < chargeProduct.length; n++) {
    const start = place(chargedAtoms[2 * n], chargedAtoms[2 * n + 1]);
    numbers[start + 6] = coulomb * chargeProduct[n];
  }
  return numbers;
}
