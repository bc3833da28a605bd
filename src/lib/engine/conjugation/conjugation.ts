/** What is asked about a molecule's conjugated bonds and what is answered. */
import type { TorsionAtoms } from '../torsion/scan-symmetry';
import type { ConjugationKind } from './conjugated-bonds';

export interface ConjugationOptions {
  /** Temperature of populations and averages, K. */
  readonly temperature: number;
  readonly seed: number;
}

/** The s-cis or the s-trans form of a bond between two double bonds: its lowest minimum on that side. */
export interface ConjugationForm {
  /** Degrees; 0 is planar s-cis. */
  readonly angle: number;
  /** Degrees from planar. */
  readonly twist: number;
  /** kcal/mol */
  readonly energy: number;
  /** kcal/mol above the lowest minimum of the molecule. */
  readonly relative: number;
  readonly label: string;
  /** 3N, Å */
  readonly coordinates: Float64Array;
}

/** One angle of the profile of a bond. */
export interface ConjugationPoint {
  readonly angle: number;
  readonly relative: number;
  readonly twist: number;
}

/**
 * A conjugated bond. Nothing turns about a bond in a ring, so all but its twist is null there; so it is too for a bond that
 * time did not suffice for.
 */
export interface BondConjugation {
  readonly bond: readonly [number, number];
  readonly kind: ConjugationKind;
  readonly inRing: boolean;
  /** Over both double bonds where there are two, so that 0 is s-cis; null in a ring without. */
  readonly torsion: TorsionAtoms | null;
  /** Twist from planarity in the lowest minimum, degrees 0 to 90; null where an end has no plane. */
  readonly twist: number | null;
  /** Null where s-cis and s-trans mean nothing, or where that side has no minimum; so are the four below. */
  readonly sCis: ConjugationForm | null;
  readonly sTrans: ConjugationForm | null;
  /** E(s-cis) − E(s-trans), kcal/mol. */
  readonly difference: number | null;
  /** Population of |angle| < 90 along the profile. */
  readonly sCisFraction: number | null;
  /** Energy at torsion 0 above the lowest minimum, kcal/mol: what a Diels-Alder reaction asks of a diene. */
  readonly planarSCisCost: number | null;
  /**
   * kcal/mol above the lowest minimum. Between s-trans and s-cis the easier way round; for all other bonds the highest point
   * of a full turn. Null where nothing hinders the turn.
   */
  readonly barrier: number | null;
  /** Population average of cos²(twist) along the profile, 0 to 1. */
  readonly meanOverlap: number | null;
  readonly profile: readonly ConjugationPoint[] | null;
  /** False when time ran out before the scan was through. */
  readonly complete: boolean;
}

export interface ConjugationResult {
  /** In the order of the molecule's bonds. */
  readonly bonds: readonly BondConjugation[];
  /** The lowest conformer, 3N in Å, and its energy in kcal/mol. */
  readonly lowest: { readonly coordinates: Float64Array; readonly energy: number };
  readonly complete: boolean;
}
