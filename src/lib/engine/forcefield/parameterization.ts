/** What every part of the parameterization works from. */
import type { Parameters } from './parameters';
import type { Structure } from './structure';

export interface Parameterization {
  readonly structure: Structure;
  /** Numeric atom types, one an atom. */
  readonly types: Readonly<Int32Array>;
  /** Classes of the bonds, one an entry of molecule.bonds. */
  readonly bondClasses: Readonly<Uint8Array>;
  readonly parameters: Parameters;
}
