/** What a torsion scan is asked and what it answers. */
import type { VibrationalAnalysis } from '../thermo/shape-free-energies';
import type { StationaryKind } from './labels';
import type { TorsionAtoms } from './scan-symmetry';

export interface ScanOptions {
  readonly torsion: TorsionAtoms;
  /** Degrees between two points; divides 360. */
  readonly step: number;
  /** Whether everything else relaxes at each angle; otherwise one geometry is turned rigidly. */
  readonly relaxed: boolean;
  readonly seed: number;
  /** Low conformers where they are known already (Å, 3N, lowest first); searched when not given. */
  readonly conformers?: readonly Float64Array[] | undefined;
}

export const defaultScanOptions: Omit<ScanOptions, 'torsion'> = {
  step: 15,
  relaxed: true,
  seed: 1,
};

/** A point of the profile with its geometry. */
export interface ProfileSample {
  readonly angle: number;
  readonly energy: number;
  readonly coordinates: Float64Array;
  readonly converged: boolean;
}

/** One point of the profile. */
export interface ScanPoint {
  /** Target angle, degrees. */
  readonly angle: number;
  /** kcal/mol */
  readonly energy: number;
  /** kcal/mol above the lowest point. */
  readonly relative: number;
  /** The torsion of the geometry returned, degrees; within 0.001 of the target. */
  readonly reached: number;
  /** 3N, Å */
  readonly coordinates: Float64Array;
  readonly converged: boolean;
}

/** A minimum or maximum of the profile. */
export interface StationaryPoint {
  readonly kind: StationaryKind;
  /**
   * Degrees, of the geometry itself and not of a grid point; but 0 or 180 where two mirror images are so near to each
   * other (2 degrees for minima, 6 for humps of one barrier) that they count as one.
   */
  readonly angle: number;
  /** kcal/mol */
  readonly energy: number;
  /** kcal/mol above the lowest stationary point. */
  readonly relative: number;
  /** Trade term, see labels.ts. */
  readonly label: string;
  /** Klyne-Prelog term with sign, for the torsion as scanned. */
  readonly range: string;
  /** 3N, Å */
  readonly coordinates: Float64Array;
  readonly converged: boolean;
  /** What a free energy rests on; only where it was asked for. */
  readonly vibrations?: VibrationalAnalysis;
}

export interface ScanResult {
  readonly torsion: TorsionAtoms;
  readonly relaxed: boolean;
  readonly step: number;
  /** Ascending in angle over (-180, 180]. Angles that time did not suffice for are missing. */
  readonly points: readonly ScanPoint[];
  /** Ascending in angle; minima and maxima alternate. */
  readonly stationary: readonly StationaryPoint[];
  readonly symmetry: {
    /** The profile is its own mirror image, E(φ) = E(-φ). */
    readonly mirror: boolean;
    /** Degrees after which the profile repeats: 360, 180, 120 or 60. */
    readonly period: number;
  };
  /** False when time ran out before the search was through. */
  readonly complete: boolean;
}
