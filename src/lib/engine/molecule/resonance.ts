/** Resonance: when two Kekulé structures on the same atoms are the same molecule. */
import { bondBetween, type Molecule } from './molecule';

/** Largest ring round which a charge counts as spread. */
const LARGEST_CHARGED_RING = 7;

interface Shift {
  readonly a: number;
  readonly b: number;
  readonly change: number;
}

/**
 * Whether renumbering the atoms gives the same molecule up to resonance. Where bond orders change they must change
 * along closed rows of 4n+2 bonds (aromatic rings; a row of 4n would be a bond shift, as in cyclooctatetraene), or
 * along two bonds at one atom with the charge (carboxylate, nitro, amidinium), or within one ring with the charge
 * (cyclopentadienide, pyrazolate). Bonds must be mapped onto bonds.
 */
export function isResonanceEquivalent(molecule: Molecule, permutation: Int32Array): boolean {
  const shifts: Shift[] = [];
  const gained = new Int32Array(molecule.atomCount);
  for (const { a, b, order } of molecule.bonds) {
    const image = bondBetween(molecule, permutation[a], permutation[b]);
    if (image < 0) return false;
    const change = molecule.bonds[image].order - order;
    if (change === 0) continue;
    shifts.push({ a, b, change });
    gained[a] += change;
    gained[b] += change;
  }
  const charges = molecule.formalCharges;
  for (let atom = 0; atom < molecule.atomCount; atom++) {
    if (charges[permutation[atom]] - charges[atom] !== gained[atom]) return false;
  }
  return rowsOf(shifts).every((row) => isDelocalized(molecule, row));
}

/** Groups changed bonds into connected rows. */
function rowsOf(shifts: readonly Shift[]): Shift[][] {
  const rows: Shift[][] = [];
  const left = new Set(shifts);
  for (const start of shifts) {
    if (!left.delete(start)) continue;
    const row = [start];
    for (const { a, b } of row) {
      for (const other of left) {
        if (![other.a, other.b].some((atom) => atom === a || atom === b)) continue;
        left.delete(other);
        row.push(other);
      }
    }
    rows.push(row);
  }
  return rows;
}

function isDelocalized(molecule: Molecule, row: readonly Shift[]): boolean {
  const atoms = new Set(row.flatMap(({ a, b }) => [a, b]));
  if (row.some(({ change }) => Math.abs(change) !== 1)) return false;
  if (atoms.size === row.length) {
    // In large benzenoid systems a row of 4n bonds is made up of shifts in their six-membered rings.
    return row.length % 4 === 2 || [...atoms].every((atom) => isInRingOfSix(molecule, atom));
  }
  if (row.length === 2) return true;
  return molecule.rings.some(
    (ring) =>
      ring.length <= LARGEST_CHARGED_RING && [...atoms].every((atom) => ring.includes(atom)),
  );
}

function isInRingOfSix(molecule: Molecule, atom: number): boolean {
  return molecule.rings.some((ring) => ring.length === 6 && ring.includes(atom));
}
