/** Fills valences with hydrogens and refuses what no closed-shell molecule can be. */
import { InputError, type InputPlace } from '../errors';
import { allowedValences, atomLabel } from './elements';
import type { RawMolecule } from './raw';

/**
 * Writes nitrogen with five bonds (nitro groups, azides, N-oxides drawn without charges) with charges, in place, as
 * the force field and the octet rule have it: N(=O)=O becomes [N+](=O)[O-].
 */
export function separateCharges(molecule: RawMolecule): void {
  const { atoms, bonds } = molecule;
  atoms.forEach((center, atom) => {
    if (center.atomicNumber !== 7 || center.charge !== 0) return;
    const own = bonds.filter(({ a, b }) => a === atom || b === atom);
    const sum = own.reduce((total, { order }) => total + order, center.hydrogens ?? 0);
    if (sum !== 5) return;
    const ends = own
      .filter(({ order }) => order >= 2)
      .map((bond) => ({ bond, end: bond.a === atom ? bond.b : bond.a }));
    const acceptor =
      ends.find(({ bond, end }) => bond.order === 2 && isTerminal(molecule, end, 8)) ??
      ends.find(({ bond, end }) => bond.order === 3 && isTerminal(molecule, end, 7)) ??
      ends.find(({ bond, end }) => bond.order === 2 && isTerminal(molecule, end, 16));
    if (!acceptor) return;
    acceptor.bond.order = acceptor.bond.order === 3 ? 2 : 1;
    center.charge = 1;
    atoms[acceptor.end].charge = -1;
  });
}

function isTerminal(molecule: RawMolecule, atom: number, atomicNumber: number): boolean {
  const { atomicNumber: found, charge, hydrogens } = molecule.atoms[atom];
  if (found !== atomicNumber || charge !== 0 || (hydrogens ?? 0) > 0) return false;
  return molecule.bonds.filter(({ a, b }) => a === atom || b === atom).length === 1;
}

/** Elements whose open valences stand for hydrogens unless the text says otherwise. */
const FILLED = new Set([5, 6, 7, 8, 9, 14, 15, 16, 17, 33, 34, 35, 52, 53]);
const HALOGENS = new Set([9, 17, 35, 53]);

/**
 * How many hydrogens each atom still needs. Throws InputError 'valence' for too many bonds and 'radical' for bonds
 * that are missing where the input states the hydrogens.
 */
export function countMissingHydrogens(molecule: RawMolecule): number[] {
  const sums = molecule.atoms.map(() => 0);
  for (const { a, b, order } of molecule.bonds) {
    sums[a] += order;
    sums[b] += order;
  }
  return molecule.atoms.map(({ atomicNumber, charge, hydrogens, line }, atom) => {
    const valences = allowedValences(atomicNumber, charge);
    if (!valences) return hydrogens ?? 0;
    const label = atomLabel(atomicNumber, atom);
    const place: InputPlace = line > 0 ? { atom, line } : { atom };
    const sum = sums[atom] + (hydrogens ?? 0);
    const fillsUp = hydrogens === null && FILLED.has(atomicNumber);
    const target = valences.find((valence) => valence >= sum);
    const charged = charge === 0 ? '' : ` with charge ${charge > 0 ? '+' : '−'}${Math.abs(charge)}`;
    if (target === undefined) {
      throw new InputError(
        'valence',
        `${label}${charged} has ${bondCount(sum)}; ${valences.length === 0 ? 'that charge is not possible' : `at most ${valences.at(-1)} are possible`}.`,
        place,
      );
    }
    if (fillsUp && (!HALOGENS.has(atomicNumber) || sum === 0)) return target - sum;
    if (target !== sum) {
      throw new InputError(
        'radical',
        `${label}${charged} has ${bondCount(sum)} and needs ${target}; radicals and open valences are not handled.`,
        place,
      );
    }
    return hydrogens ?? 0;
  });
}

function bondCount(count: number): string {
  return count === 1 ? '1 bond' : `${count} bonds`;
}
