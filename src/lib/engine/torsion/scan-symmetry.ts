/** Symmetries of a molecule that a torsion scan can use: a point of the profile gives others without computing them. */
import { torsion } from '../geometry';
import type { Control } from '../control';
import type { ForceField } from '../forcefield/forcefield';
import { symmetryClasses } from '../molecule/symmetry-classes';
import type { Random } from '../random';
import { findAutomorphism, sameEitherWay } from './automorphism';
import type { SymmetryQuestion } from './automorphism';
import { readHandedness } from './handedness';

export type TorsionAtoms = readonly [number, number, number, number];

/** Atom a of the transformed geometry takes the place of atom source[a]; then all is reflected when `mirror`. */
export interface SymmetryOperation {
  readonly source: Readonly<Int32Array>;
  readonly mirror: boolean;
}

/** An operation that turns the scanned torsions into each other, exactly. */
export interface ExactSymmetry extends SymmetryOperation {
  /** Torsion t of the transformed geometry is sign times torsion from[t] of the original. */
  readonly from: readonly number[];
  readonly sign: 1 | -1;
}

/** An operation after which the scanned torsion reads another torsion about the same bond. */
export interface ShiftingSymmetry extends SymmetryOperation {
  /** Degrees from the (mirrored) angle of the original to that of the transformed geometry: about 60, 120 or 180. */
  readonly shift: number;
}

export interface ScanSymmetry {
  /** Without the identity. */
  readonly exact: readonly ExactSymmetry[];
  /**
   * One for each way to turn the profile into itself (a methyl by 120, a phenyl by 180). Not exact away from stationary
   * points, because only one of the torsions about the bond is held at a grid angle, but they give excellent
   * starts, and stationary points they give exactly. Empty for maps.
   */
  readonly shifting: readonly ShiftingSymmetry[];
}

/** Puts the transformed geometry into `out`. */
export function applySymmetry(
  operation: SymmetryOperation,
  x: Float64Array,
  out: Float64Array,
): void {
  const { source, mirror } = operation;
  for (let atom = 0; atom < source.length; atom++) {
    out[3 * atom] = x[3 * source[atom]];
    out[3 * atom + 1] = x[3 * source[atom] + 1];
    out[3 * atom + 2] = mirror ? -x[3 * source[atom] + 2] : x[3 * source[atom] + 2];
  }
}

/** The operation that undoes another. */
export function inverseSymmetry(operation: SymmetryOperation): SymmetryOperation {
  const source = new Int32Array(operation.source.length);
  operation.source.forEach((from, atom) => {
    source[from] = atom;
  });
  return { source, mirror: operation.mirror };
}

/**
 * Finds the symmetries of a scan of one or two torsions. `x` (Å, 3N) is any sound geometry of the molecule, from which
 * the configuration is read: a chiral molecule has no mirror. Each operation is proved by the energy of a distorted geometry.
 */
export async function findScanSymmetry(
  forceField: ForceField,
  torsions: readonly TorsionAtoms[],
  x: Float64Array,
  random: Random,
  control: Control,
): Promise<ScanSymmetry> {
  const { molecule } = forceField;
  const classes = symmetryClasses(molecule);
  const question = { molecule, classes, handedness: readHandedness(molecule, x) };
  const prove = createProof(forceField, x, random);
  const exact: ExactSymmetry[] = [];
  for (const candidate of exactCandidates(torsions.length)) {
    if (control.due()) await control.pause();
    const source = findForTorsions(question, torsions, candidate.from, candidate.sign === -1);
    const operation = source && { ...candidate, source, mirror: candidate.sign === -1 };
    if (operation && prove(operation)) exact.push(operation);
  }
  const shifting: ShiftingSymmetry[] = [];
  if (torsions.length > 1) return { exact, shifting };
  const known = new Set([...exact.map(() => 'true 0'), 'false 0']);
  for (const candidate of shiftingCandidates(question, torsions[0], x)) {
    if (control.due()) await control.pause();
    const key = `${candidate.mirror} ${candidate.shift}`;
    if (known.has(key)) continue;
    const source = findAutomorphism(question, candidate.anchors, candidate.mirror);
    if (!source || !prove({ source, mirror: candidate.mirror })) continue;
    known.add(key);
    shifting.push({ source, mirror: candidate.mirror, shift: candidate.shift });
  }
  return { exact, shifting };
}

/** All that can happen to one or two torsions except nothing. */
function exactCandidates(count: number): { from: number[]; sign: 1 | -1 }[] {
  if (count === 1) return [{ from: [0], sign: -1 }];
  return [
    { from: [0, 1], sign: -1 },
    { from: [1, 0], sign: 1 },
    { from: [1, 0], sign: -1 },
  ];
}

/** Each torsion may be read from either end. */
function findForTorsions(
  question: SymmetryQuestion,
  torsions: readonly TorsionAtoms[],
  from: readonly number[],
  mirror: boolean,
): Int32Array | null {
  const readings = 1 << torsions.length;
  for (let reading = 0; reading < readings; reading++) {
    const anchors = torsions.flatMap((atoms, t) => {
      const images = torsions[from[t]];
      const reversed = ((reading >> t) & 1) === 1;
      return atoms.map((atom, n) => [atom, images[reversed ? 3 - n : n]] as const);
    });
    const source = findAutomorphism(question, anchors, mirror);
    if (source) return source;
  }
  return null;
}

interface ShiftingCandidate {
  readonly anchors: readonly (readonly [number, number])[];
  readonly mirror: boolean;
  readonly shift: number;
}

/** The other torsions about the same bond, read either way, whose ends are like those of the one scanned. */
function shiftingCandidates(
  { molecule, classes }: SymmetryQuestion,
  atoms: TorsionAtoms,
  x: Float64Array,
): ShiftingCandidate[] {
  const [i, j, k, l] = atoms;
  const own = torsion(x, i, j, k, l);
  const found: ShiftingCandidate[] = [];
  for (const [first, second] of [
    [j, k],
    [k, j],
  ]) {
    for (const { atom: front } of molecule.neighbors[first]) {
      for (const { atom: rear } of molecule.neighbors[second]) {
        const images = [front, first, second, rear];
        if (front === second || rear === first || sameEitherWay(images, atoms)) continue;
        if (classes[front] !== classes[i] || classes[rear] !== classes[l]) continue;
        const anchors = atoms.map((atom, n) => [atom, images[n]] as const);
        const angle = torsion(x, front, first, second, rear);
        for (const mirror of [false, true]) {
          found.push({ anchors, mirror, shift: shiftBetween(own, angle, mirror) });
        }
      }
    }
  }
  return found;
}

/** The shift from a torsion to what reads `angle` before any mirror, to the nearest turn that substituents are apart. */
function shiftBetween(own: number, angle: number, mirror: boolean): number {
  const turn = mirror ? own - angle : angle - own;
  return 60 * ((Math.round(turn / 60) + 12) % 6);
}

/** How far atoms are moved for the proof, Å, and how equal two energies must be, kcal/mol per kcal/mol. */
const PROOF_DISTORTION = 0.1;
const PROOF_TOLERANCE = 1e-8;

function createProof(
  forceField: ForceField,
  x: Float64Array,
  random: Random,
): (operation: SymmetryOperation) => boolean {
  const distorted = x.map((coordinate) => coordinate + PROOF_DISTORTION * random.normal());
  const gradient = new Float64Array(x.length);
  const transformed = new Float64Array(x.length);
  const reference = forceField.energy(distorted, gradient);
  return (operation) => {
    applySymmetry(operation, distorted, transformed);
    const energy = forceField.energy(transformed, gradient);
    return Math.abs(energy - reference) <= PROOF_TOLERANCE * (1 + Math.abs(reference));
  };
}
