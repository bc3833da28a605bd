/** Torsion profiles side by side: which, how they are laid over one another, and what the differences are. */
import { z } from 'zod';
import {
  profileCurve,
  ROOM_TEMPERATURE,
  summarizeProfile,
  wrapDegrees,
  type PeriodicCurve,
} from '../engine/light';
import { energyUnits, type EnergyUnit } from './energy-units';

/** More lines than these cannot be told apart. */
export const MOST_PROFILES = 8;

/** A profile on the plot. Its angle φ is shown at ±φ + shift: minus where it is mirrored. */
export interface Pick {
  readonly profile: string;
  readonly mirrored: boolean;
  /** Degrees, in (-180, 180]. */
  readonly shift: number;
}

/** All that the address of a comparison says. */
export interface ComparisonView {
  readonly picks: readonly Pick[];
  /** K */
  readonly temperature: number;
  readonly unit: EnergyUnit;
  /** The angle at which energies are read off, degrees. */
  readonly angle: number;
}

const PICK = /^([0-9a-f-]{36})(\.m)?(?:\.(-?\d{1,3}))?$/;

const viewSchema = z.object({
  temperature: z.coerce.number().min(100).max(1000).catch(ROOM_TEMPERATURE),
  unit: z.enum(energyUnits).catch('kcal/mol'),
  angle: z.coerce.number().int().min(-180).max(180).catch(0),
});

function readPick(text: string): Pick[] {
  const [, profile, mirror, shift] = PICK.exec(text) ?? [];
  if (profile === undefined || !z.uuid().safeParse(profile).success) return [];
  return [{ profile, mirrored: mirror !== undefined, shift: wrapDegrees(Number(shift ?? 0)) }];
}

/** Reads a comparison out of an address; what is odd or given twice is left out. */
export function readComparison(parameters: URLSearchParams): ComparisonView {
  const picks = parameters.getAll('p').flatMap(readPick);
  const distinct = picks.filter(
    ({ profile }, n) => picks.findIndex((other) => other.profile === profile) === n,
  );
  const rest = viewSchema.parse({
    temperature: parameters.get('temperature') ?? undefined,
    unit: parameters.get('unit'),
    angle: parameters.get('angle') ?? undefined,
  });
  return { picks: distinct.slice(0, MOST_PROFILES), ...rest };
}

/** The query of a comparison's address. */
export function comparisonQuery(view: ComparisonView): string {
  const query = new URLSearchParams();
  for (const { profile, mirrored, shift } of view.picks) {
    query.append('p', `${profile}${mirrored ? '.m' : ''}${shift === 0 ? '' : `.${shift}`}`);
  }
  if (view.temperature !== ROOM_TEMPERATURE) query.set('temperature', String(view.temperature));
  if (view.unit !== 'kcal/mol') query.set('unit', view.unit);
  if (view.angle !== 0) query.set('angle', String(view.angle));
  return query.toString();
}

/** A stored profile as it is compared; energies in kcal/mol above its own lowest. */
export interface ComparedProfile {
  readonly id: string;
  readonly moleculeId: string;
  readonly molecule: string;
  /** "C2–C3" */
  readonly bond: string;
  /** "C–C, conjugated" */
  readonly bondKind: string;
  /** The atoms that are eclipsed at 0°: "C1 and C4"; and their elements. */
  readonly zero: string;
  readonly zeroElements: string;
  readonly model: string;
  readonly relaxed: boolean;
  readonly complete: boolean;
  readonly points: readonly { readonly angle: number; readonly relative: number }[];
  readonly stationary: readonly {
    readonly kind: 'minimum' | 'maximum';
    readonly angle: number;
    readonly relative: number;
    readonly label: string;
  }[];
  readonly mirror: boolean;
}

/** A profile's curve over the angles of the plot. */
export function layCurve(profile: ComparedProfile, pick: Pick): (angle: number) => number {
  const curve = curveOf(profile);
  return (angle) => curve.at(pick.mirrored ? pick.shift - angle : angle - pick.shift);
}

function curveOf({ points, stationary }: ComparedProfile): PeriodicCurve {
  return profileCurve({
    points: points.map(({ angle, relative }) => ({ angle, energy: relative })),
    stationary: stationary.map(({ kind, angle, relative }) => ({ kind, angle, energy: relative })),
  });
}

/** What is read off one profile; energies in kcal/mol, angles as laid on the plot. */
export interface ComparisonRow {
  readonly profile: ComparedProfile;
  readonly pick: Pick;
  readonly preferred: { readonly label: string; readonly angle: number } | null;
  /** Share of the molecules in basins with the preferred form's name, 0 to 1. */
  readonly population: number | null;
  /** The highest barrier out of any minimum. */
  readonly barrier: number | null;
  /** At the chosen angle, above the profile's own lowest. */
  readonly energy: number;
  /** Root mean square of the difference from the first profile over the whole turn; 0 for the first. */
  readonly distance: number;
}

/** Reads off every profile what the table shows. */
export function compareProfiles(
  profiles: readonly ComparedProfile[],
  view: ComparisonView,
): ComparisonRow[] {
  const rows = view.picks.flatMap((pick) => {
    const profile = profiles.find(({ id }) => id === pick.profile);
    return profile ? [{ profile, pick, at: layCurve(profile, pick) }] : [];
  });
  return rows.map(({ profile, pick, at }) => {
    const { preferred, population, barrier } = summarize(profile, view.temperature);
    return {
      profile,
      pick,
      preferred: preferred && {
        label: preferred.label,
        angle: wrapDegrees((pick.mirrored ? -preferred.angle : preferred.angle) + pick.shift),
      },
      population,
      barrier,
      energy: at(view.angle),
      distance: rmsDifference(rows[0].at, at),
    };
  });
}

function summarize(profile: ComparedProfile, temperature: number) {
  const stationary = profile.stationary.map((point) => ({ ...point, energy: point.relative }));
  const { basins, crossings } = summarizeProfile(
    {
      points: profile.points.map(({ angle, relative }) => ({ angle, energy: relative })),
      stationary,
      symmetry: { mirror: profile.mirror },
    },
    temperature,
  );
  const [preferred = null] = stationary
    .filter(({ kind }) => kind === 'minimum')
    .sort((a, b) => a.energy - b.energy);
  const population = basins
    .filter(({ minimum }) => stationary[minimum].label === preferred?.label)
    .reduce((sum, basin) => sum + basin.population, 0);
  return {
    preferred,
    population: basins.length > 0 ? population : null,
    barrier: crossings.length > 0 ? Math.max(...crossings.map(({ barrier }) => barrier)) : null,
  };
}

/** Degrees between the angles at which two curves are compared. */
const FINENESS = 5;

function rmsDifference(a: (angle: number) => number, b: (angle: number) => number): number {
  let sum = 0;
  for (let angle = -180; angle < 180; angle += FINENESS) sum += (a(angle) - b(angle)) ** 2;
  return Math.sqrt(sum / (360 / FINENESS));
}

/** Shifts that are tried, degrees: profiles differ in their reference by the angles between substituents. */
const SHIFTS = [0, 60, 120, 180, -120, -60];

/**
 * The way of laying a profile that brings it nearest to another one, where that is clearly nearer than the present way;
 * null otherwise. Both curves count from their own lowest point.
 */
export function betterPick(
  first: (angle: number) => number,
  profile: ComparedProfile,
  present: Pick,
): Pick | null {
  const now = rmsDifference(first, layCurve(profile, present));
  const ways = [false, true].flatMap((mirrored) =>
    SHIFTS.map((shift): Pick => ({ profile: profile.id, mirrored, shift })),
  );
  const [best] = ways
    .map((pick) => ({ pick, distance: rmsDifference(first, layCurve(profile, pick)) }))
    .sort((a, b) => a.distance - b.distance);
  return best.distance < 0.5 * now && now - best.distance > 0.2 ? best.pick : null;
}
