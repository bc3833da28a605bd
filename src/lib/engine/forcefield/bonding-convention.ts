/** One convention for what chemists draw in several: charge-separated or with expanded octets, and resonance forms. */
import type { Molecule } from '../molecule/molecule';
import type { Bonding } from './bonding';

const CARBON = 6;
const NITROGEN = 7;
const OXYGEN = 8;
const PHOSPHORUS = 15;
const SULFUR = 16;
const CHLORINE = 17;

/**
 * Copies bond orders and charges and brings them to the convention of the typing rules: S=O, P=O and Cl=O instead of
 * S⁺–O⁻; N⁺–O⁻ instead of pentavalent N=O; azides and diazo groups as =N⁺=N⁻;
 * sulfinates as O=S–O⁻; enolates and nitronates with the charge on oxygen.
 */
export function normalizeBonding(molecule: Molecule): Bonding {
  const bonding: Bonding = {
    elements: molecule.atomicNumbers,
    charges: Int8Array.from(molecule.formalCharges),
    orders: Uint8Array.from(molecule.bonds, ({ order }) => order),
    neighbors: molecule.neighbors,
  };
  for (let atom = 0; atom < molecule.atomCount; atom++) {
    if ([PHOSPHORUS, SULFUR, CHLORINE].includes(bonding.elements[atom])) {
      expandOctet(bonding, atom);
      moveChargeOutward(bonding, atom);
    } else if (bonding.elements[atom] === NITROGEN) {
      splitPentavalent(bonding, atom);
      cumulateDiazo(bonding, atom);
    }
  }
  for (let atom = 0; atom < molecule.atomCount; atom++) enolize(bonding, atom);
  return bonding;
}

function isTerminal(bonding: Bonding, atom: number): boolean {
  return bonding.neighbors[atom].length === 1;
}

/** X⁺–Y⁻ becomes X=Y for Y a chalcogen or nitrogen. */
function expandOctet(bonding: Bonding, center: number): void {
  for (const { atom, bond } of bonding.neighbors[center]) {
    if (bonding.charges[center] <= 0) return;
    if (bonding.charges[atom] >= 0 || bonding.orders[bond] !== 1) continue;
    if (![NITROGEN, OXYGEN, SULFUR].includes(bonding.elements[atom])) continue;
    bonding.orders[bond] = 2;
    bonding.charges[center]--;
    bonding.charges[atom]++;
  }
}

/** X⁻=Y becomes X–Y⁻ for a terminal chalcogen Y (sulfinates drawn with the charge on sulfur). */
function moveChargeOutward(bonding: Bonding, center: number): void {
  for (const { atom, bond } of bonding.neighbors[center]) {
    if (bonding.charges[center] >= 0) return;
    if (!isTerminal(bonding, atom) || bonding.orders[bond] !== 2) continue;
    if (![OXYGEN, SULFUR].includes(bonding.elements[atom])) continue;
    bonding.orders[bond] = 1;
    bonding.charges[center]++;
    bonding.charges[atom]--;
  }
}

/** Neutral nitrogen with five bonds: one of a terminal oxygen's or nitrogen's bonds becomes a charge pair. */
function splitPentavalent(bonding: Bonding, center: number): void {
  const valence = bonding.neighbors[center].reduce(
    (sum, { bond }) => sum + bonding.orders[bond],
    0,
  );
  if (valence !== 5 || bonding.charges[center] !== 0) return;
  const terminal = bonding.neighbors[center].filter(
    ({ atom, bond }) =>
      bonding.orders[bond] > 1 &&
      isTerminal(bonding, atom) &&
      [NITROGEN, OXYGEN].includes(bonding.elements[atom]),
  );
  if (terminal.length === 0) return;
  const { atom, bond } = terminal[0];
  bonding.orders[bond]--;
  bonding.charges[center]++;
  bonding.charges[atom]--;
}

/** X⁻–N⁺≡N becomes X=N⁺=N⁻. */
function cumulateDiazo(bonding: Bonding, center: number): void {
  const neighbors = bonding.neighbors[center];
  if (bonding.charges[center] !== 1 || neighbors.length !== 2) return;
  for (const [end, other] of [neighbors, [...neighbors].reverse()]) {
    const isDiazo =
      bonding.orders[end.bond] === 3 &&
      bonding.elements[end.atom] === NITROGEN &&
      isTerminal(bonding, end.atom) &&
      bonding.orders[other.bond] === 1 &&
      bonding.charges[other.atom] === -1 &&
      bonding.elements[other.atom] !== OXYGEN;
    if (!isDiazo) continue;
    bonding.orders[end.bond] = 2;
    bonding.charges[end.atom] = -1;
    bonding.orders[other.bond] = 2;
    bonding.charges[other.atom] = 0;
    return;
  }
}

/**
 * ⁻C–X=O becomes C=X–O⁻, X carbon or positive nitrogen. With more than one such oxygen the form would be a guess, and
 * the carbon stays as it is, to be refused.
 */
function enolize(bonding: Bonding, carbon: number): void {
  const neighbors = bonding.neighbors[carbon];
  if (bonding.elements[carbon] !== CARBON || bonding.charges[carbon] !== -1) return;
  if (neighbors.length !== 3 || neighbors.some(({ bond }) => bonding.orders[bond] !== 1)) return;
  const ways = neighbors.flatMap((inner) =>
    bonding.elements[inner.atom] === CARBON || bonding.charges[inner.atom] === 1
      ? bonding.neighbors[inner.atom]
          .filter(({ atom, bond }) => isTerminal(bonding, atom) && bonding.orders[bond] === 2)
          .filter(({ atom }) => bonding.elements[atom] === OXYGEN)
          .map((outer) => ({ inner, outer }))
      : [],
  );
  if (ways.length !== 1) return;
  const [{ inner, outer }] = ways;
  bonding.orders[inner.bond] = 2;
  bonding.orders[outer.bond] = 1;
  bonding.charges[carbon] = 0;
  bonding.charges[outer.atom] = -1;
}
