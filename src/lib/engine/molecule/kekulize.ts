/** Places the double bonds of systems written as aromatic. */
import { InputError } from '../errors';
import { allowedValences, atomLabel } from './elements';
import { maximumMatching } from './matching';
import type { RawMolecule } from './raw';
import { findRingBonds } from './rings';

/**
 * Turns aromatic bonds (order 4) into single and double bonds, in place. Every aromatic atom whose valence calls for
 * it gets exactly one double bond; where no such arrangement exists, an InputError names an atom left over.
 */
export function kekulize(molecule: RawMolecule): void {
  const { atoms, bonds } = molecule;
  if (!bonds.some(({ order }) => order === 4)) {
    const lone = atoms.findIndex(({ aromatic }) => aromatic);
    if (lone >= 0) throw noAlternation(molecule, lone);
    return;
  }
  chargeAromaticOxides(molecule);
  const inRing = ringBondsOf(molecule);
  const wants = atoms.map((_, atom) => wantsDoubleBond(molecule, atom));
  const adjacent: number[][] = atoms.map(() => []);
  bonds.forEach(({ a, b, order }, bond) => {
    // A bond between two rings, as in biphenyl, is written without a mark but is a single bond.
    if (order !== 4 || !inRing[bond] || !wants[a] || !wants[b]) return;
    adjacent[a].push(b);
    adjacent[b].push(a);
  });
  const partner = maximumMatching(adjacent);
  const alone = wants.findIndex((wanted, atom) => wanted && partner[atom] < 0);
  if (alone >= 0) throw noAlternation(molecule, alone);
  for (const bond of bonds) {
    if (bond.order === 4) bond.order = partner[bond.a] === bond.b ? 2 : 1;
  }
}

function noAlternation(molecule: RawMolecule, atom: number): InputError {
  const { atomicNumber, line } = molecule.atoms[atom];
  return new InputError(
    'valence',
    `The aromatic system at ${atomLabel(atomicNumber, atom)} cannot be drawn with alternating double bonds; a hydrogen or a charge may be missing (pyrrole is c1cc[nH]c1).`,
    line > 0 ? { atom, line } : { atom },
  );
}

/** n(=O) in an aromatic ring is written as n+ with O-, the form with four bonds to nitrogen. */
function chargeAromaticOxides(molecule: RawMolecule): void {
  for (const bond of molecule.bonds) {
    if (bond.order !== 2) continue;
    for (const [nitrogen, oxygen] of [
      [bond.a, bond.b],
      [bond.b, bond.a],
    ]) {
      const [n, o] = [molecule.atoms[nitrogen], molecule.atoms[oxygen]];
      if (n.atomicNumber !== 7 || !n.aromatic || n.charge !== 0) continue;
      if (o.atomicNumber !== 8 || o.charge !== 0 || o.aromatic) continue;
      bond.order = 1;
      n.charge = 1;
      o.charge = -1;
    }
  }
}

function ringBondsOf(molecule: RawMolecule): Uint8Array {
  const neighbors = molecule.atoms.map(() => [] as { atom: number; bond: number }[]);
  molecule.bonds.forEach(({ a, b }, bond) => {
    neighbors[a].push({ atom: b, bond });
    neighbors[b].push({ atom: a, bond });
  });
  return findRingBonds(
    neighbors,
    molecule.bonds.map(({ a, b }) => ({ a, b, order: 1 })),
  );
}

/** Whether an aromatic atom needs one double bond within its ring. */
function wantsDoubleBond(molecule: RawMolecule, atom: number): boolean {
  const { atomicNumber, charge, hydrogens } = molecule.atoms[atom];
  let sum = hydrogens ?? 0;
  let aromaticBonds = 0;
  for (const { a, b, order } of molecule.bonds) {
    if (a !== atom && b !== atom) continue;
    sum += order === 4 ? 1 : order;
    if (order === 4) aromaticBonds++;
  }
  if (aromaticBonds === 0) return false;
  const valences = allowedValences(atomicNumber, charge);
  if (!valences) return false;
  // Without a stated count, hydrogens fill up what the double bond leaves.
  if (hydrogens === null) return sum < (valences.find((valence) => valence >= sum) ?? 0);
  return !valences.includes(sum) && valences.includes(sum + 1);
}
