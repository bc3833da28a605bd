/** The empirical rules for torsions that the table lacks (Halgren, J. Comput. Chem. 1996, 17, 616, rules a to h). */
import { periodicRow } from './element-rows';
import type { AtomProperties } from './parameters';

const CARBON = 6;

/** U (twofold), V (threefold) and W (chalcogen pairs) by atomic number (part V, table IV). */
const TORSION_FACTORS: Readonly<Record<number, { u: number; v: number; w?: number }>> = {
  6: { u: 2.0, v: 2.12 },
  7: { u: 2.0, v: 1.5 },
  8: { u: 2.0, v: 0.2, w: 2.0 },
  14: { u: 1.25, v: 1.22 },
  15: { u: 1.25, v: 2.4 },
  16: { u: 1.25, v: 0.49, w: 8.0 },
};

/** The bond about which the torsion turns. */
export interface CentralBond {
  readonly j: AtomProperties;
  readonly k: AtomProperties;
  /** An edge of an aromatic ring is neither single nor double. */
  readonly kind: 'single' | 'double' | 'triple' | 'aromatic';
}

type Coefficients = readonly [number, number, number];
const NONE: Coefficients = [0, 0, 0];
const twofold = (v2: number): Coefficients => [0, v2, 0];
const threefold = (v3: number): Coefficients => [0, 0, v3];

/** [V1, V2, V3] in kcal/mol; undefined for elements that the rules do not cover. */
export function estimateTorsion(bond: CentralBond): Coefficients | undefined {
  const { j, k } = bond;
  // Rule a.
  if (j.linear || k.linear) return NONE;
  const first = TORSION_FACTORS[j.atomicNumber];
  const second = TORSION_FACTORS[k.atomicNumber];
  if (!first || !second) return undefined;
  const u = Math.sqrt(first.u * second.u);
  if (bond.kind === 'aromatic' && j.aromatic && k.aromatic) {
    return twofold(aromaticBarrier(j, k) * u);
  }
  // Rule c.
  if (bond.kind === 'double') {
    return twofold(6 * (j.multipleBond === 2 && k.multipleBond === 2 ? 1 : 0.4) * u);
  }
  const saturated = threefold(
    Math.sqrt(first.v * second.v) / ((j.coordination - 1) * (k.coordination - 1)),
  );
  // Rules d, e and f.
  if (j.coordination === 4 && k.coordination === 4) return saturated;
  if (j.coordination === 4) return turnsFreely(k) ? NONE : saturated;
  if (k.coordination === 4) return turnsFreely(j) ? NONE : saturated;
  const conjugation = bond.kind === 'single' ? conjugationFactor(j, k) : undefined;
  if (conjugation !== undefined) return twofold(6 * conjugation * u);
  // Rule h.
  if (first.w !== undefined && second.w !== undefined) {
    return twofold(-Math.sqrt(first.w * second.w));
  }
  return saturated;
}

/** Rule b: β times π_jk within an aromatic ring. */
function aromaticBarrier(j: AtomProperties, k: AtomProperties): number {
  const beta = (j.valence === 3 && k.valence === 4) || (j.valence === 4 && k.valence === 3) ? 3 : 6;
  return beta * (j.piLonePair || k.piLonePair ? 0.3 : 0.5);
}

/** Rules e and f: next to a four-coordinate atom, an unsaturated one has no barrier of its own. */
function turnsFreely(atom: AtomProperties): boolean {
  if (atom.coordination === 3) return atom.valence === 4 || atom.multipleBond > 0;
  if (atom.coordination === 2) return atom.valence === 3 || atom.multipleBond > 0;
  return false;
}

/** Rule g: π_jk of a single bond between multiply bonded or lone-pair atoms; undefined where the rule does not apply. */
function conjugationFactor(j: AtomProperties, k: AtomProperties): number | undefined {
  const isConjugated =
    (j.multipleBond > 0 && k.multipleBond > 0) ||
    (j.multipleBond > 0 && k.piLonePair) ||
    (j.piLonePair && k.multipleBond > 0);
  if (!isConjugated) return undefined;
  if (j.piLonePair && k.piLonePair) return 0;
  if (j.piLonePair && k.multipleBond > 0) return lonePairFactor(j, k);
  if (k.piLonePair && j.multipleBond > 0) return lonePairFactor(k, j);
  const isPartial = j.multipleBond === 1 || k.multipleBond === 1;
  const isCarbonPair = j.atomicNumber === CARBON && k.atomicNumber === CARBON;
  return isPartial && !isCarbonPair ? 0.4 : 0.15;
}

/**
 * Part V says "second row", and rows of the published table made by this rule (6-9, 8-9, 43-64: V2 = 3.6) show that
 * lithium to fluorine is meant; but RDKit 2022.09.3 and openchemlib 9.25 both take sodium to chlorine, and a total
 * energy that agrees with neither would serve nobody. It matters for a few bonds only, such as thiazole to
 * sulfonamide nitrogen.
 */
function lonePairFactor(donor: AtomProperties, acceptor: AtomProperties): number {
  if (donor.multipleBond === 1) return 0.5;
  const areSecondRow =
    periodicRow(donor.atomicNumber) === 2 && periodicRow(acceptor.atomicNumber) === 2;
  return areSecondRow ? 0.3 : 0.15;
}
