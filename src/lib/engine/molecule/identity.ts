/** What a molecule is made of. */
import { atomicMass } from './atomic-weights';
import { ELEMENT_SYMBOLS } from './elements';
import type { Molecule } from './molecule';

/**
 * Molecular formula in Hill order (J. Am. Chem. Soc. 1900, 22, 478): carbon, hydrogen, the rest by the alphabet;
 * without carbon all by the alphabet. Isotopes count as their element; a charge follows as +, −, 2+ and so on.
 */
export function molecularFormula(molecule: Molecule): string {
  const counts = new Map<string, number>();
  for (const atomicNumber of molecule.atomicNumbers) {
    const symbol = ELEMENT_SYMBOLS[atomicNumber];
    counts.set(symbol, (counts.get(symbol) ?? 0) + 1);
  }
  const leading = counts.has('C') ? ['C', 'H'].filter((symbol) => counts.has(symbol)) : [];
  const others = [...counts.keys()].filter((symbol) => !leading.includes(symbol)).sort();
  const parts = [...leading, ...others].map((symbol) => {
    const count = counts.get(symbol) ?? 0;
    return count > 1 ? `${symbol}${count}` : symbol;
  });
  const charge = netCharge(molecule);
  const size = Math.abs(charge) > 1 ? Math.abs(charge) : '';
  return parts.join('') + (charge === 0 ? '' : `${size}${charge > 0 ? '+' : '−'}`);
}

/** Molar mass, g/mol, named isotopes with their own masses. */
export function molarMass(molecule: Molecule): number {
  let sum = 0;
  for (let atom = 0; atom < molecule.atomCount; atom++) {
    sum += atomicMass(molecule.atomicNumbers[atom], molecule.massNumbers[atom]);
  }
  return sum;
}

/** Sum of the formal charges, in units of the elementary charge. */
export function netCharge(molecule: Molecule): number {
  return molecule.formalCharges.reduce((sum, charge) => sum + charge, 0);
}
