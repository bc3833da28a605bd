/** What a molfile of either version says, before valences are filled and stereo is understood. */
import type { RawMolecule } from './raw';

/** How the single bond a-b is drawn: its narrow end at a, the wide one at b. */
export type Wedge = 'up' | 'down' | 'either';

/** A connection table with what belongs to its drawing or geometry. */
export interface RawMolfile {
  readonly molecule: RawMolecule;
  /** 3N, Å (or drawing units). */
  readonly coordinates: Float64Array;
  /** By bond index. */
  readonly wedges: ReadonlyMap<number, Wedge>;
  /** Double bonds marked as either cis or trans. */
  readonly openDoubleBonds: ReadonlySet<number>;
  /** Atom parities as stated, 1 or 2, by atom. */
  readonly parities: ReadonlyMap<number, number>;
  /** Atoms of racemic or relative stereo groups: their configuration is one of two. */
  readonly groupedCenters: readonly number[];
  /** What the header says of the dimensions: "2D", "3D" or nothing. */
  readonly dimensions: string;
}

/** The body of a connection table, as both versions read it. */
export type ConnectionTable = Omit<RawMolfile, 'dimensions'>;
