/** Aromatic rings as MMFF94 sees them (part I, "aromatic ring perception"; part V): six π electrons in five or six atoms. */
import type { Bonding } from './bonding';

/** Elements whose lone pair can complete the sextet of a five-membered ring. */
const LONE_PAIR_ELEMENTS = [7, 8, 16];

export interface AromaticRings {
  readonly aromaticRings: readonly (readonly number[])[];
  readonly aromaticBonds: Uint8Array;
}

/**
 * Finds the aromatic rings among `rings`. A ring atom gives one electron by a double bond that lies in the ring or in
 * a neighboring aromatic ring, and one atom of a five-membered ring may give a lone pair. Rings are looked at until
 * nothing changes, so neither their order nor the Kekulé structure of a benzenoid matters.
 */
export function findAromaticRings(
  bonding: Bonding,
  rings: readonly (readonly number[])[],
): AromaticRings {
  const aromaticBonds = new Uint8Array(bonding.orders.length);
  const aromaticRings: (readonly number[])[] = [];
  let waiting = rings.filter((ring) => ring.length === 5 || ring.length === 6);
  for (;;) {
    const found = waiting.filter((ring) => piElectrons(bonding, ring, aromaticBonds) === 6);
    if (found.length === 0) break;
    aromaticRings.push(...found);
    waiting = waiting.filter((ring) => !found.includes(ring));
    for (const ring of found) for (const bond of ringBonds(bonding, ring)) aromaticBonds[bond] = 1;
  }
  // In the order of the rings given, not in the order of discovery.
  return { aromaticRings: rings.filter((ring) => aromaticRings.includes(ring)), aromaticBonds };
}

/** The bonds of a ring given as its atoms in order. */
export function ringBonds(bonding: Bonding, ring: readonly number[]): number[] {
  return ring.map((atom, n) => {
    const next = ring[(n + 1) % ring.length];
    return bonding.neighbors[atom].find((neighbor) => neighbor.atom === next)!.bond;
  });
}

/** The π electrons of a ring; NaN when an atom cannot take part. */
function piElectrons(bonding: Bonding, ring: readonly number[], aromaticBonds: Uint8Array): number {
  const bonds = ringBonds(bonding, ring);
  let electrons = 0;
  for (const atom of ring) {
    if (bonding.neighbors[atom].length > 3) return NaN;
    const multiple = bonding.neighbors[atom].filter(({ bond }) => bonding.orders[bond] > 1);
    if (multiple.length === 0 && ring.length === 5 && bearsLonePair(bonding, atom)) {
      electrons += 2;
    } else if (
      multiple.length === 1 &&
      bonding.orders[multiple[0].bond] === 2 &&
      (bonds.includes(multiple[0].bond) || aromaticBonds[multiple[0].bond])
    ) {
      electrons += 1;
    } else {
      return NaN;
    }
  }
  return electrons;
}

function bearsLonePair(bonding: Bonding, atom: number): boolean {
  return LONE_PAIR_ELEMENTS.includes(bonding.elements[atom]) && bonding.charges[atom] <= 0;
}
