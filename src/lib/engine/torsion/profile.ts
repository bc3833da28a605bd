/** What a torsion profile means at a temperature: how much of each form there is and how fast one becomes another. */
import { basinPopulations } from '../thermo/basins';
import { createPeriodicCurve } from '../thermo/periodic-curve';
import type { PeriodicCurve } from '../thermo/periodic-curve';
import { eyringRate, halfLife, stabilityClass } from '../thermo/rates';
import type { StabilityClass } from '../thermo/rates';
import { freeEnergies } from '../thermo/shape-free-energies';
import type { VibrationalAnalysis } from '../thermo/shape-free-energies';
import { fitFourier } from './fourier';
import type { FourierSeries } from './fourier';
import type { StationaryKind } from './labels';

/** What is needed of a scan; energies in kcal/mol from one zero, angles in degrees. */
export interface Profile {
  readonly points: readonly { readonly angle: number; readonly energy: number }[];
  /** Ascending in angle, minima and maxima in turn. */
  readonly stationary: readonly {
    readonly kind: StationaryKind;
    readonly angle: number;
    readonly energy: number;
    readonly vibrations?: VibrationalAnalysis | undefined;
  }[];
  readonly symmetry: { readonly mirror: boolean };
}

/** A basin round a minimum. */
export interface Basin {
  /** Position of its minimum in the profile's list of stationary points. */
  readonly minimum: number;
  /** Share of molecules between the barriers on its two sides, 0 to 1. */
  readonly population: number;
}

/** One way over a barrier, by the model's ΔE‡ in the place of ΔG‡, and by ΔG‡ where both ends have a free energy. */
export interface Crossing {
  /** Position of the maximum, and of the minima before and behind, in the list of stationary points. */
  readonly maximum: number;
  readonly from: number;
  readonly to: number;
  /** kcal/mol */
  readonly barrier: number;
  /** 1/s, by Eyring with transmission coefficient 1. */
  readonly rate: number;
  /** s */
  readonly halfLife: number;
  readonly free: FreeCrossing | null;
}

/** The same by the free energy of activation. */
export interface FreeCrossing {
  /** ΔG‡, kcal/mol */
  readonly barrier: number;
  /** 1/s and s, by Eyring with transmission coefficient 1. */
  readonly rate: number;
  readonly halfLife: number;
}

export interface ProfileSummary {
  /** K */
  readonly temperature: number;
  readonly basins: readonly Basin[];
  /** Each barrier from below and from above in angle. */
  readonly crossings: readonly Crossing[];
  /**
   * The barrier in kcal/mol, from the lowest minimum, that divides the circle in two sets of forms, and the stability class
   * it gives the axis, with the same barrier by free energy; null with fewer than two basins.
   */
  readonly interconversion: {
    readonly barrier: number;
    readonly stability: StabilityClass;
    readonly free: FreeCrossing | null;
  } | null;
  /**
   * Free energy of each stationary point above that of the lowest minimum, kcal/mol; null where it has none, or where a minimum
   * has none that could be the lowest.
   */
  readonly freeEnergies: readonly (number | null)[];
  readonly fourier: FourierSeries | null;
}

/** The smooth curve through a profile's grid and its stationary points; what is drawn, integrated and read off. */
export function profileCurve({
  points,
  stationary,
}: Pick<Profile, 'points' | 'stationary'>): PeriodicCurve {
  const all = [...points, ...stationary];
  return createPeriodicCurve(
    all.map(({ angle }) => angle),
    all.map(({ energy }) => energy),
  );
}

/** Summarizes a profile at a temperature in K. */
export function summarizeProfile(profile: Profile, temperature: number): ProfileSummary {
  const { points, stationary, symmetry } = profile;
  const positions = (kind: StationaryKind): number[] =>
    stationary.flatMap((point, n) => (point.kind === kind ? [n] : []));
  const minima = positions('minimum');
  const maxima = positions('maximum');
  const free = freeEnergies(stationary, temperature);
  // A scan that ran out of time may lack barriers; then nothing can be said about what lies between them.
  const whole = minima.length === maxima.length;
  const crossings = (whole ? maxima : []).flatMap((maximum): Crossing[] => {
    const count = stationary.length;
    const before = (maximum + count - 1) % count;
    const behind = (maximum + 1) % count;
    return [
      crossingOf(stationary, free, before, maximum, behind, temperature),
      crossingOf(stationary, free, behind, maximum, before, temperature),
    ];
  });
  return {
    temperature,
    basins: whole ? basinsOf(profile, minima, maxima, temperature) : [],
    crossings,
    interconversion: whole ? interconversionOf(profile, free, minima, maxima, temperature) : null,
    freeEnergies: aboveLowestMinimum(free, minima),
    fourier:
      points.length < 3
        ? null
        : fitFourier(
            points.map(({ angle }) => angle),
            points.map(({ energy }) => energy),
            symmetry.mirror,
          ),
  };
}

function crossingOf(
  stationary: Profile['stationary'],
  free: readonly (number | null)[],
  from: number,
  maximum: number,
  to: number,
  temperature: number,
): Crossing {
  const barrier = stationary[maximum].energy - stationary[from].energy;
  return {
    maximum,
    from,
    to,
    ...overBarrier(barrier, temperature),
    free: freeCrossing(free[from], free[maximum], temperature),
  };
}

function overBarrier(barrier: number, temperature: number): FreeCrossing {
  const rate = eyringRate(barrier, temperature);
  return { barrier, rate, halfLife: halfLife(rate) };
}

function freeCrossing(
  from: number | null,
  over: number | null,
  temperature: number,
): FreeCrossing | null {
  return from === null || over === null ? null : overBarrier(over - from, temperature);
}

function aboveLowestMinimum(
  free: readonly (number | null)[],
  minima: readonly number[],
): (number | null)[] {
  const floor = lowestOf(free, minima);
  return free.map((energy) => (energy === null || floor === null ? null : energy - floor));
}

/** The lowest of some energies; null where there are none or one of them is missing. */
function lowestOf(
  energies: readonly (number | null)[],
  positions: readonly number[],
): number | null {
  const chosen = positions.map((position) => energies[position]);
  return chosen.length === 0 || chosen.includes(null) ? null : Math.min(...(chosen as number[]));
}

function basinsOf(
  profile: Profile,
  minima: readonly number[],
  maxima: readonly number[],
  temperature: number,
): Basin[] {
  const borders = maxima.map((maximum) => profile.stationary[maximum].angle);
  const populations = basinPopulations(profileCurve(profile), borders, temperature);
  // The basin behind border n holds the next minimum, since the two kinds alternate.
  return minima.map((minimum) => {
    const before = maxima.findLastIndex((maximum) => maximum < minimum);
    return { minimum, population: populations.at(before) ?? 1 };
  });
}

/** Two sets of forms are parted by the two highest maxima of the circle, and the lower of these is the way between them. */
function interconversionOf(
  { stationary }: Profile,
  free: readonly (number | null)[],
  minima: readonly number[],
  maxima: readonly number[],
  temperature: number,
): ProfileSummary['interconversion'] {
  if (minima.length < 2 || maxima.length < 2) return null;
  const energies = stationary.map(({ energy }) => energy);
  const barrier = secondHighest(energies, maxima)! - lowestOf(energies, minima)!;
  return {
    barrier,
    stability: stabilityClass(barrier),
    free: freeCrossing(lowestOf(free, minima), secondHighest(free, maxima), temperature),
  };
}

/** Null where one is missing. */
function secondHighest(
  energies: readonly (number | null)[],
  positions: readonly number[],
): number | null {
  const heights = positions.map((position) => energies[position]);
  return heights.includes(null) ? null : (heights as number[]).sort((a, b) => b - a)[1];
}
