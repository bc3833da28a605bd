/** Bounds on all interatomic distances of a molecule, from its graph: the input of distance geometry. */
import type { Molecule } from '../molecule/molecule';
import { toRadians } from '../units';
import type { AtomShape } from './ideal-geometry';
import { atomShapes, flatRings, idealAngle, idealLength, idealRingAngle } from './ideal-geometry';

/** Lower and upper bounds, Å; both N × N, row by row, symmetric. */
export interface DistanceBounds {
  readonly lower: Float64Array;
  readonly upper: Float64Array;
}

/** How far a 1-2 distance may be off, Å. */
const LENGTH_SLACK = 0.01;
/** How far an angle may be off, degrees: outside rings, inside rings, and between a ring and what hangs on it. */
const ANGLE_SLACK = 3;
const RING_ANGLE_SLACK = 6;
const STRAINED_ANGLE_SLACK = 16;
/** Slack of a fixed 1-4 distance, Å. */
const TORSION_SLACK = 0.06;
/** Closest approach of atoms that no short path joins, Å: two heavy atoms, one of them hydrogen, both hydrogen. */
const CONTACTS = [2.9, 2.4, 2.0];
/** Largest torsion inside a ring by its size, degrees; no limit from nine on. */
const RING_TORSIONS = [0, 0, 0, 0, 40, 55, 70, 110, 140];

/** Computes the bounds; the triangle inequality holds for the upper ones (Crippen and Havel, 1988). */
export function distanceBounds(molecule: Molecule): DistanceBounds {
  const n = molecule.atomCount;
  const bounds: DistanceBounds = {
    lower: new Float64Array(n * n),
    upper: new Float64Array(n * n).fill(1e3),
  };
  const shapes = atomShapes(molecule);
  const flat = flatRings(molecule, shapes);
  boundContacts(molecule, bounds);
  const lengths = boundBonds(molecule, bounds, flat);
  const angles = boundAngles(molecule, bounds, shapes, lengths);
  boundTorsions(molecule, bounds, shapes, flat, lengths, angles);
  smooth(n, bounds);
  return bounds;
}

function set(bounds: DistanceBounds, n: number, i: number, j: number, low: number, high: number) {
  bounds.lower[i * n + j] = bounds.lower[j * n + i] = low;
  bounds.upper[i * n + j] = bounds.upper[j * n + i] = high;
}

function boundContacts({ atomCount: n, atomicNumbers }: Molecule, bounds: DistanceBounds): void {
  for (let i = 0; i < n; i++) {
    bounds.upper[i * n + i] = 0;
    for (let j = 0; j < i; j++) {
      const hydrogens = Number(atomicNumbers[i] === 1) + Number(atomicNumbers[j] === 1);
      set(bounds, n, i, j, CONTACTS[hydrogens], 1e3);
    }
  }
}

function boundBonds(
  molecule: Molecule,
  bounds: DistanceBounds,
  flat: readonly (readonly number[])[],
): Float64Array {
  return Float64Array.from(molecule.bonds, ({ a, b }, bond) => {
    const length = idealLength(molecule, bond, sharesRing(flat, [a, b]));
    set(bounds, molecule.atomCount, a, b, length - LENGTH_SLACK, length + LENGTH_SLACK);
    return length;
  });
}

function sharesRing(rings: readonly (readonly number[])[], atoms: readonly number[]): boolean {
  return rings.some((ring) => atoms.every((atom) => ring.includes(atom)));
}

/** Size of the smallest ring that holds all the atoms as neighbors round it, 0 where there is none. */
function ringSize(molecule: Molecule, atoms: readonly number[]): number {
  let smallest = 0;
  for (const ring of molecule.rings) {
    if (!atoms.every((atom) => ring.includes(atom))) continue;
    if (smallest === 0 || ring.length < smallest) smallest = ring.length;
  }
  return smallest;
}

type AngleTable = Map<string, number>;

/** Bounds 1-3 distances; answers the expected angles by "i,j,k". */
function boundAngles(
  molecule: Molecule,
  bounds: DistanceBounds,
  shapes: readonly AtomShape[],
  lengths: Float64Array,
): AngleTable {
  const table: AngleTable = new Map();
  const n = molecule.atomCount;
  for (let j = 0; j < n; j++) {
    const neighbors = molecule.neighbors[j];
    const smallest = Math.min(...molecule.rings.filter((r) => r.includes(j)).map((r) => r.length));
    for (const { atom: i, bond: first } of neighbors) {
      for (const { atom: k, bond: second } of neighbors) {
        if (i === k) continue;
        const { angle, slack } = expectedAngle(molecule, shapes[j], [i, j, k], smallest);
        table.set(`${i},${j},${k}`, angle);
        // In a ring of three the ends are bonded, and in one of four two paths speak: the first is enough.
        if (i > k || bounds.upper[i * n + k] < 1e3) continue;
        const across = (degrees: number): number =>
          thirdSide(lengths[first], lengths[second], Math.min(180, degrees));
        set(bounds, n, i, k, across(angle - slack), across(angle + slack));
      }
    }
  }
  return table;
}

function expectedAngle(
  molecule: Molecule,
  shape: AtomShape,
  [i, j, k]: [number, number, number],
  smallest: number,
): { angle: number; slack: number } {
  const size = ringSize(molecule, [i, j, k]);
  if (shape === 'crowded') return { angle: 120, slack: 60 };
  // A linear atom in a ring can only be nearly so.
  if (shape === 'linear') return { angle: size > 0 ? 165 : 180, slack: size > 0 ? 15 : 3 };
  if (size > 0 && size < 9) {
    return { angle: idealRingAngle(size, shape), slack: RING_ANGLE_SLACK };
  }
  const angle = idealAngle(shape);
  if (smallest > 5) return { angle, slack: ANGLE_SLACK };
  // Opening a small ring's angle closes none of the others: they spread.
  const spread = (angle - idealRingAngle(smallest, shape)) / (shape === 'planar' ? 2 : 6);
  return { angle: angle + Math.max(0, spread), slack: STRAINED_ANGLE_SLACK };
}

function thirdSide(a: number, b: number, degrees: number): number {
  return Math.sqrt(a * a + b * b - 2 * a * b * Math.cos(toRadians(degrees)));
}

function boundTorsions(
  molecule: Molecule,
  bounds: DistanceBounds,
  shapes: readonly AtomShape[],
  flat: readonly (readonly number[])[],
  lengths: Float64Array,
  angles: AngleTable,
): void {
  const n = molecule.atomCount;
  molecule.bonds.forEach(({ a: j, b: k }, bond) => {
    for (const { atom: i, bond: first } of molecule.neighbors[j]) {
      for (const { atom: l, bond: last } of molecule.neighbors[k]) {
        if (i === k || l === j || i === l || bounds.upper[i * n + l] < 1e3) continue;
        const at = (torsion: number): number =>
          fourthSide(
            lengths[first],
            lengths[bond],
            lengths[last],
            angles.get(`${i},${j},${k}`)!,
            angles.get(`${j},${k},${l}`)!,
            torsion,
          );
        const [low, high] = torsionRange(molecule, shapes, flat, bond, [i, j, k, l]);
        set(bounds, n, i, l, at(low) - TORSION_SLACK, at(high) + TORSION_SLACK);
      }
    }
  });
}

/** Distance of the ends of a chain of three bonds at a torsion in degrees. */
function fourthSide(
  first: number,
  middle: number,
  last: number,
  angle1: number,
  angle2: number,
  torsion: number,
): number {
  const x1 = first * Math.cos(toRadians(angle1));
  const y1 = first * Math.sin(toRadians(angle1));
  const x2 = middle - last * Math.cos(toRadians(angle2));
  const y2 = last * Math.sin(toRadians(angle2));
  const cosine = Math.cos(toRadians(torsion));
  return Math.sqrt((x2 - x1) ** 2 + y1 * y1 + y2 * y2 - 2 * y1 * y2 * cosine);
}

/** The torsions a chain may take, as unsigned degrees. */
function torsionRange(
  molecule: Molecule,
  shapes: readonly AtomShape[],
  flat: readonly (readonly number[])[],
  bond: number,
  [i, j, k, l]: [number, number, number, number],
): [number, number] {
  if (sharesRing(flat, [j, k])) return sharesRing(flat, [i, j, k, l]) ? [0, 0] : [0, 180];
  const size = ringSize(molecule, [i, j, k, l]);
  const isDouble =
    molecule.bonds[bond].order === 2 && shapes[j] === 'planar' && shapes[k] === 'planar';
  if (!isDouble) return size > 0 ? [0, RING_TORSIONS[size] ?? 180] : [0, 180];
  if (size > 0 && size < 8) return [0, 0];
  const cis = isCis(molecule, bond, [i, j, k, l]);
  if (cis === null) return [0, 180];
  return cis ? [0, 0] : [180, 180];
}

/** Whether i and l lie on one side of a double bond with a known configuration; null where it is free. */
function isCis(
  molecule: Molecule,
  bond: number,
  [i, j, , l]: [number, number, number, number],
): boolean | null {
  const stereobond = molecule.stereobonds.find((candidate) => candidate.bond === bond);
  if (!stereobond) return null;
  const [a, b, , d] = stereobond.atoms;
  const [near, far] = b === j ? [i, l] : [l, i];
  const turns = Number(near !== a) + Number(far !== d);
  return turns % 2 === 0 ? stereobond.cis : !stereobond.cis;
}

/** Tightens upper bounds by i-j ≤ i-k + k-j and lower ones by i-j ≥ i-k - k-j. */
function smooth(n: number, { lower, upper }: DistanceBounds): void {
  for (let k = 0; k < n; k++) {
    for (let i = 0; i < n; i++) {
      const ik = upper[i * n + k];
      for (let j = 0; j < i; j++) {
        const kj = upper[k * n + j];
        if (ik + kj < upper[i * n + j]) upper[i * n + j] = upper[j * n + i] = ik + kj;
        const least = Math.max(lower[i * n + k] - kj, lower[k * n + j] - ik);
        if (least > lower[i * n + j]) lower[i * n + j] = lower[j * n + i] = least;
      }
    }
  }
  // Bounds that contradict each other (cages, strained rings) meet in the middle; the force field decides.
  for (let pair = 0; pair < n * n; pair++) {
    if (lower[pair] <= upper[pair]) continue;
    lower[pair] = upper[pair] = (lower[pair] + upper[pair]) / 2;
  }
}
