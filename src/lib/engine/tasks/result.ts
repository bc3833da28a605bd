/** What the engine answers. Energies kcal/mol, angles degrees, atoms from 0, geometries as molfiles. */
import type { BondConjugation, ConjugationForm } from '../conjugation/conjugation';
import type { Conformer, SearchEnd } from '../conformers/conformers';
import type { InputWarning } from '../errors';
import type { TermEnergies, Variant } from '../forcefield/forcefield';
import type { TorsionStrain } from '../strain/strain';
import type { VibrationalAnalysis } from '../thermo/shape-free-energies';
import type { MapCell, MapMinimum, MapResult } from '../torsion/map';
import type { ProfileSummary } from '../torsion/profile';
import type { ScanPoint, ScanResult, StationaryPoint } from '../torsion/scan-result';
import type { Task, TaskKind } from './request';

/** A geometry goes out as a molfile in the place of its coordinates. */
export type AsMolfile<Shape> = Omit<Shape, 'coordinates'> & { readonly molfile: string };

/** What is needed to get the same numbers again, and how long it took. */
export interface Provenance {
  readonly version: string;
  readonly model: Variant;
  /** The task with every default filled in. */
  readonly settings: Task;
  readonly seconds: number;
}

/** What every result carries. */
export interface CommonResult {
  /** The prepared molecule in its final atom order; the geometry is the task's main one. */
  readonly molfile: string;
  /** Canonical isomeric SMILES. */
  readonly smiles: string;
  readonly warnings: readonly InputWarning[];
  readonly provenance: Provenance;
}

/** What a task hands to the front door: its own fields, and what goes into the common ones. */
export interface Outcome<Fields> {
  readonly fields: Fields;
  /** Å, 3N: the geometry of the result's molfile. */
  readonly coordinates: Float64Array;
  readonly warnings: readonly InputWarning[];
}

export interface EnergyFields {
  readonly energy: number;
  readonly terms: TermEnergies;
  readonly atomTypes: readonly number[];
  /** Electron charges. */
  readonly charges: readonly number[];
  /** kcal/mol/Å */
  readonly gradientRms: number;
}

export interface MinimizeFields {
  readonly energy: number;
  readonly converged: boolean;
  readonly gradientRms: number;
  readonly evaluations: number;
}

export interface WeighedConformer extends AsMolfile<Conformer> {
  readonly vibrations: VibrationalAnalysis;
  /** kcal/mol above the lowest free energy at the task's temperature; null where there is none. */
  readonly freeEnergy: number | null;
  /** Share by free energy, 0 to 1; null for what was left out, and where shares cannot be told. */
  readonly freePopulation: number | null;
}

export interface ConformersFields {
  /** Lowest first. */
  readonly conformers: readonly WeighedConformer[];
  /** True when the set within the window stopped changing and is here whole. */
  readonly complete: boolean;
  readonly ended: SearchEnd;
}

/** Basins and crossings name stationary points by their position in the list. */
export interface ScanFields extends Omit<ScanResult, 'points' | 'stationary'>, ProfileSummary {
  /** Ascending in angle over (-180, 180]. */
  readonly points: readonly AsMolfile<ScanPoint>[];
  readonly stationary: readonly AsMolfile<StationaryPoint>[];
}

export interface MapFields extends Omit<MapResult, 'cells' | 'minima'> {
  /** Row by row; energies and molfile are null where time ran out before the cell was reached. */
  readonly cells: readonly (Omit<MapCell, 'coordinates' | 'energy' | 'relative'> & {
    readonly energy: number | null;
    readonly relative: number | null;
    readonly molfile: string | null;
  })[];
  readonly minima: readonly AsMolfile<MapMinimum>[];
}

export interface ConjugationFields {
  readonly bonds: readonly (Omit<BondConjugation, 'sCis' | 'sTrans'> & {
    readonly sCis: AsMolfile<ConjugationForm> | null;
    readonly sTrans: AsMolfile<ConjugationForm> | null;
  })[];
  readonly complete: boolean;
}

export interface StrainFields {
  /** Energy of the geometry relaxed in place above the lowest conformer found. */
  readonly strain: number;
  readonly strainTerms: TermEnergies;
  /** Energies of the geometry as given, relaxed in place, and of the lowest conformer found. */
  readonly given: number;
  readonly relaxed: number;
  readonly lowest: number;
  /** The longest way a heavy atom went while relaxing in place, Å, and which one. */
  readonly largestDisplacement: number;
  readonly farthestAtom: number;
  /** Most strained first. */
  readonly torsions: readonly TorsionStrain[];
  readonly complete: boolean;
  readonly relaxedMolfile: string;
  readonly lowestMolfile: string;
}

export interface FieldsByKind {
  readonly energy: EnergyFields;
  readonly minimize: MinimizeFields;
  readonly conformers: ConformersFields;
  readonly scan: ScanFields;
  readonly map: MapFields;
  readonly conjugation: ConjugationFields;
  readonly strain: StrainFields;
}

export type Fields = FieldsByKind[TaskKind];

export type Result<Kind extends TaskKind = TaskKind> = FieldsByKind[Kind] & CommonResult;
