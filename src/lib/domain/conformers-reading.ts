/** The conformers of a molecule as they are read at a temperature: how much of each there is, by energy and by free energy. */
import {
  boltzmannPopulations,
  freePopulations,
  relativeFreeEnergies,
  type VibrationalAnalysis,
} from '../engine/light';

/** Energies in kcal/mol. Results of versions before 0.3 have no vibrations. */
export interface StoredConformer {
  readonly relative: number;
  readonly degeneracy: number;
  readonly vibrations?: VibrationalAnalysis | null | undefined;
}

export interface ConformersReading {
  /** By ΔE, 0 to 1, in the order of the conformers. */
  readonly populations: readonly number[];
  /** Null for results without vibrations. */
  readonly free: {
    /** ΔG above the lowest of them, kcal/mol; null where there is none. */
    readonly relative: readonly (number | null)[];
    /** By ΔG, 0 to 1; null for those left out, and for all where one that may matter has no free energy. */
    readonly populations: readonly (number | null)[];
    /** Share by ΔE of those that have no population by ΔG. */
    readonly leftOut: number;
  } | null;
}

/** Reads conformers, lowest first, at a temperature in K. */
export function readConformers(
  conformers: readonly StoredConformer[],
  temperature: number,
): ConformersReading {
  const populations = boltzmannPopulations(
    conformers.map(({ relative }) => relative),
    conformers.map(({ degeneracy }) => degeneracy),
    temperature,
  );
  if (!conformers.some(({ vibrations }) => vibrations)) return { populations, free: null };
  const shapes = conformers.map((conformer) => ({ ...conformer, energy: conformer.relative }));
  const shares = freePopulations(shapes, temperature) ?? conformers.map(() => null);
  return {
    populations,
    free: {
      relative: relativeFreeEnergies(shapes, temperature),
      populations: shares,
      leftOut: populations.reduce((sum, share, n) => (shares[n] === null ? sum + share : sum), 0),
    },
  };
}

/** The share of the lowest in ΔE by ΔG, and the most populated by ΔG, counted from 0; null where shares are not known. */
export function freeLeader({ free }: ConformersReading) {
  const shares = (free?.populations ?? []).map((share) => share ?? 0);
  const share = Math.max(0, ...shares);
  return share > 0 ? { lowest: shares[0], leader: shares.indexOf(share), share } : null;
}
