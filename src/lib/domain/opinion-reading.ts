/** A scan together with its second opinion, read at a temperature: every model's barriers, their mean, and where they disagree. */
import {
  aboveOwnLowest,
  consensusOf,
  readModelCurve,
  widestSpread,
  type Consensus,
  type ModelCurve,
  type RelativeCurve,
} from './model-curves';
import { disagreementsOf, type Disagreement } from './model-comparison';
import { readProfile, type ProfileReading, type StoredProfile } from './profile-reading';
import type { OpinionDepth } from './second-opinions';

/** A scan's opinion as it is stored; energies in kcal/mol, null for gaps. */
export interface Opinion {
  readonly depth: OpinionDepth;
  readonly curves: readonly {
    readonly model: string;
    readonly energies: readonly (number | null)[];
  }[];
  readonly gaps: readonly {
    readonly angle: number;
    readonly model: string;
    readonly reason: string;
  }[];
}

/** One model's view of the turn. */
export interface ModelView {
  readonly model: string;
  readonly curve: RelativeCurve;
  /** Null where too few points are known. */
  readonly reading: ProfileReading | null;
}

export interface OpinionReading {
  readonly depth: OpinionDepth;
  /** The scan's own model first. */
  readonly models: readonly ModelView[];
  readonly consensus: Consensus;
  /** The mean read as a profile; null where too few angles have all models. */
  readonly consensusReading: ProfileReading | null;
  readonly disagreements: readonly Disagreement[];
  readonly spread: { readonly angle: number; readonly spread: number } | null;
  readonly missing: number;
}

/** Reads a scan and its opinion at a temperature in K. */
export function readOpinion(
  scan: StoredProfile & { readonly model: string },
  opinion: Opinion,
  temperature: number,
): OpinionReading {
  const own: ModelView = {
    model: scan.model,
    curve: { model: scan.model, points: scan.points },
    reading: readProfile(scan, temperature),
  };
  const others = opinion.curves.map(({ model, energies }): ModelView => {
    const curve: ModelCurve = {
      model,
      points: scan.points.map(({ angle }, n) => ({ angle, energy: energies[n] })),
    };
    return {
      model,
      curve: aboveOwnLowest(curve),
      reading: readModelCurve(curve, scan, temperature),
    };
  });
  const models = [own, ...others];
  const consensus = consensusOf(models.map(({ curve }) => aboveOwnLowest(fromRelative(curve))));
  const mean = {
    model: 'mean',
    points: consensus.points.map(({ angle, mean: energy }) => ({ angle, energy })),
  };
  return {
    depth: opinion.depth,
    models,
    consensus,
    consensusReading: readModelCurve(mean, scan, temperature),
    disagreements: disagreementsOf(
      models.flatMap(({ model, reading }) => (reading ? [{ model, reading }] : [])),
    ),
    spread: widestSpread(consensus),
    missing: opinion.gaps.length,
  };
}

function fromRelative({ model, points }: RelativeCurve): ModelCurve {
  return { model, points: points.map(({ angle, relative }) => ({ angle, energy: relative })) };
}
