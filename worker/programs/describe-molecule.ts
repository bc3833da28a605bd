/** The engine's molecule as the external programs take it. */
import type { Molecule } from '../../src/lib/engine';
import type { ProgramMolecule } from './program';

/** Takes the symbols of the elements by atomic number, since this room knows only the engine's types. */
export function describeMolecule(
  { atomicNumbers, formalCharges, bonds }: Molecule,
  symbols: readonly string[],
): ProgramMolecule {
  const charge = formalCharges.reduce((sum, each) => sum + each, 0);
  const electrons = atomicNumbers.reduce((sum, each) => sum + each, 0) - charge;
  return {
    symbols: Array.from(atomicNumbers, (each) => symbols[each]),
    charge,
    unpaired: electrons % 2,
    bonds,
  };
}
