/** A torsion profile as it is read at a temperature: its forms by name, how much of each there is, and what a turn costs. */
import {
  eyringRate,
  halfLife,
  profileCurve,
  summarizeProfile,
  turnBetween,
  wrapDegrees,
  type FreeCrossing,
  type PeriodicCurve,
  type Profile,
  type StabilityClass,
  type VibrationalAnalysis,
} from '../engine/light';

export interface StationaryPoint {
  readonly kind: 'minimum' | 'maximum';
  readonly angle: number;
  /** kcal/mol above the lowest of the profile. */
  readonly relative: number;
  readonly label: string;
  readonly converged: boolean;
  /** What its free energy rests on; missing in rigid scans and in results of versions before 0.3. */
  readonly vibrations?: VibrationalAnalysis | undefined;
}

/** A stored profile; angles in degrees, energies in kcal/mol. */
export interface StoredProfile {
  readonly points: readonly { readonly angle: number; readonly relative: number }[];
  /** Ascending in angle, minima and maxima in turn. */
  readonly stationary: readonly StationaryPoint[];
  readonly symmetry: { readonly mirror: boolean };
}

/** What lies between two neighboring maxima. */
export interface Basin {
  readonly from: number;
  /** More than `from`, and so possibly more than 180. */
  readonly to: number;
  readonly minimum: StationaryPoint;
  readonly population: number;
}

/** Minima that are one form: the same name and energy at mirrored or repeated angles. */
export interface Form {
  readonly label: string;
  readonly angles: readonly number[];
  readonly relative: number;
  /** ΔG of the first of them, kcal/mol; null where there is none. */
  readonly free: number | null;
  readonly population: number;
}

/** The turn from one set of forms to the other, the easier way round. */
export interface Turn {
  readonly barrier: number;
  /** 1/s and s, by Eyring with the model's ΔE‡ for ΔG‡. */
  readonly rate: number;
  readonly halfLife: number;
  readonly stability: StabilityClass;
  /** The same by ΔG‡; null where it is not known. */
  readonly free: FreeCrossing | null;
}

/** One way over a maximum. */
export interface Way {
  readonly maximum: number;
  readonly barrier: number;
  readonly halfLife: number;
  readonly free: FreeCrossing | null;
}

export interface ProfileReading {
  readonly temperature: number;
  readonly curve: PeriodicCurve;
  /** By the angle of their minimum; empty where the scan does not have all barriers. */
  readonly basins: readonly Basin[];
  /** Lowest first. */
  readonly forms: readonly Form[];
  /** Null with fewer than two basins. */
  readonly turn: Turn | null;
  /** Both ways over each maximum. */
  readonly ways: readonly Way[];
  /** ΔG of the stationary points above the lowest minimum's, kcal/mol, null where there is none; null for profiles without. */
  readonly freeEnergies: readonly (number | null)[] | null;
}

/** Minima of one name whose energies differ by less are one form, kcal/mol. */
const SAME_ENERGY = 0.05;
/** An angle this near to a stationary point is said to be there, degrees. */
const AT_POINT = 1.5;

/** A stored profile as the engine's functions take it. */
function asProfile({ points, stationary, symmetry }: StoredProfile): Profile {
  return {
    symmetry,
    points: points.map(({ angle, relative }) => ({ angle, energy: relative })),
    stationary: stationary.map(({ kind, angle, relative, vibrations }) => ({
      kind,
      angle,
      energy: relative,
      vibrations,
    })),
  };
}

/** Reads a profile at a temperature in K. */
export function readProfile(profile: StoredProfile, temperature: number): ProfileReading {
  const energies = asProfile(profile);
  const summary = summarizeProfile(energies, temperature);
  const { stationary } = profile;
  const count = stationary.length;
  const basins = summary.basins.map(({ minimum, population }): Basin => {
    const around = (step: number): number => stationary[(minimum + count + step) % count].angle;
    const from = around(-1);
    const width = (around(1) - from + 360) % 360 || 360;
    return { from, to: from + width, minimum: stationary[minimum], population };
  });
  const { interconversion } = summary;
  const rate = interconversion && eyringRate(interconversion.barrier, temperature);
  return {
    temperature,
    curve: profileCurve(energies),
    basins,
    forms: formsOf(profile, basins, summary.freeEnergies),
    turn:
      interconversion && rate !== null
        ? { ...interconversion, rate, halfLife: halfLife(rate) }
        : null,
    ways: summary.crossings,
    freeEnergies: stationary.some(({ vibrations }) => vibrations) ? summary.freeEnergies : null,
  };
}

function formsOf(
  { stationary }: StoredProfile,
  basins: readonly Basin[],
  freeEnergies: readonly (number | null)[],
): Form[] {
  const forms: (Omit<Form, 'angles' | 'population'> & { angles: number[]; population: number })[] =
    [];
  const minima = stationary
    .filter(({ kind }) => kind === 'minimum')
    .toSorted((a, b) => a.relative - b.relative);
  for (const minimum of minima) {
    const population = basins.find((basin) => basin.minimum === minimum)?.population ?? 0;
    const known = forms.find(
      ({ label, relative }) => label === minimum.label && minimum.relative - relative < SAME_ENERGY,
    );
    if (known) {
      known.angles.push(minimum.angle);
      known.population += population;
    } else {
      const { label, angle, relative } = minimum;
      const free = freeEnergies[stationary.indexOf(minimum)];
      forms.push({ label, angles: [angle], relative, free, population });
    }
  }
  return forms;
}

/** The basin an angle lies in; null where the scan does not have all barriers. */
export function basinAt({ basins }: ProfileReading, angle: number): Basin | null {
  return (
    basins.find(({ from, to }) => {
      const along = (wrapDegrees(angle) - from + 720) % 360;
      return along <= to - from;
    }) ?? null
  );
}

/** What an angle is called: the stationary point it is at, else the basin it lies in. */
export function nameAt(profile: StoredProfile, reading: ProfileReading, angle: number): string {
  const point = profile.stationary.find(
    (candidate) => Math.abs(turnBetween(candidate.angle, angle)) <= AT_POINT,
  );
  return point?.label ?? basinAt(reading, angle)?.minimum.label ?? '';
}

/** Angles of one form as people write them: "180°", "±65°", "±45° and ±135°". */
export function anglesText(angles: readonly number[]): string {
  const rounded = [...new Set(angles.map((angle) => Math.round(angle)))];
  const sizes = [...new Set(rounded.map(Math.abs))].sort((a, b) => a - b);
  const texts = sizes.map((size) => {
    const isBoth = size !== 0 && size !== 180 && rounded.includes(size) && rounded.includes(-size);
    if (isBoth) return `±${size}°`;
    return `${rounded.includes(size) ? size : -size}°`.replace('-', '−');
  });
  if (texts.length < 3) return texts.join(' and ');
  return `${texts.slice(0, -1).join(', ')} and ${texts.at(-1)}`;
}
