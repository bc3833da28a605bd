/**
 * Answers in a sentence, made from the numbers of a result. Energies in
 * kcal/mol, told in the unit asked for; temperatures in K.
 */
import { energyText, type EnergyUnit } from './energy-units';
import { anglesText, type Form, type ProfileReading } from './profile-reading';

const CELSIUS_ZERO = 273.15;

/** A share in percent; small ones keep a digit that means something. */
export function percent(share: number): string {
  const value = 100 * share;
  if (value > 0 && value < 0.1) return 'less than 0.1 %';
  if (value > 99.9 && value < 100) return 'more than 99.9 %';
  return `${value < 10 ? value.toFixed(1) : value.toFixed(0)} %`;
}

/** A temperature in degrees Celsius. */
export function celsius(temperature: number): string {
  return `${Math.round(temperature - CELSIUS_ZERO)} °C`;
}

/** A length of time in the unit that suits it. */
export function duration(seconds: number): string {
  const units = [
    [1e-9, 'ns'],
    [1e-6, 'µs'],
    [1e-3, 'ms'],
    [1, 's'],
    [60, 'min'],
    [3600, 'h'],
    [86_400, 'days'],
    [31_557_600, 'years'],
  ] as const;
  if (seconds < 1e-12) return 'less than a picosecond';
  if (seconds < 1e-9) return `${Number((seconds * 1e12).toPrecision(2))} ps`;
  const [size, name] = [...units].reverse().find(([unit]) => seconds >= unit)!;
  const value = seconds / size;
  return value >= 10_000
    ? `more than ${value.toExponential(0)} ${name}`
    : `${Number(value.toPrecision(2))} ${name}`;
}

/** Remarks that sentences make in their own words, or that every molecule given without a geometry gets. */
const SAID_OTHERWISE = new Set(['incomplete-search', 'hydrogens-added', 'geometry-built']);

/** A sentence with the remarks of its result in it, so that nobody reads the one without the other. */
export function remarked(
  sentence: string,
  warnings: readonly { readonly code: string; readonly message: string }[],
): string {
  const remarks = warnings
    .filter(({ code }) => !SAID_OTHERWISE.has(code))
    .map(({ message }) => message.replace(/[.]$/, ''));
  return [sentence.replace(/[.]$/, ''), ...remarks].join('; ') + '.';
}

const unfinishedScan = 'the scan ran out of time, so lower forms and barriers may be missing';

/** A rate constant in 1/s, with a power of ten as people write it. */
export function rateText(rate: number): string {
  if (rate >= 0.01 && rate < 10_000) return `${Number(rate.toPrecision(2))} s⁻¹`;
  const [mantissa, power] = rate.toExponential(1).split('e');
  const digits = '⁰¹²³⁴⁵⁶⁷⁸⁹';
  const raised = power
    .replace('+', '')
    .replace(/[-\d]/g, (sign) => (sign === '-' ? '⁻' : digits[Number(sign)]));
  return `${mantissa} × 10${raised} s⁻¹`;
}

/** What is told, with the energy model that it rests on: "C2–C3 by MMFF94s". */
export function byModel(subject: string, model: string): string {
  return `${subject} by ${model}`;
}

export interface ConformersFacts {
  readonly model: string;
  readonly count: number;
  readonly window: number;
  readonly lowestPopulation: number;
  readonly temperature: number;
  readonly complete: boolean;
  /** Share by ΔG of the lowest in ΔE, and which holds most by ΔG, counted from 0; null or missing where that is not known. */
  readonly free?: {
    readonly lowest: number;
    readonly leader: number;
    readonly share: number;
  } | null;
}

export function conformersSentence(facts: ConformersFacts, unit: EnergyUnit): string {
  const { count, window, lowestPopulation, temperature, complete } = facts;
  const within = byModel(energyText(window, unit), facts.model);
  const search = complete
    ? ''
    : '; the search ended before its set stopped changing, so others may exist';
  if (count === 1) return `One conformer within ${within}${search}.`;
  return `${count} conformers within ${within}; the lowest holds ${percent(lowestPopulation)} by ΔE${freeShareText(facts)} at ${celsius(temperature)}${search}.`;
}

function freeShareText({ free }: ConformersFacts): string {
  if (!free) return '';
  const { lowest, leader, share } = free;
  const other = leader === 0 ? '' : `, where conformer ${leader + 1} leads with ${percent(share)},`;
  return ` and ${percent(lowest)} by ΔG${other}`;
}

export interface ConjugationFacts {
  readonly bond: string;
  /** E(s-cis) − E(s-trans); null where a side has no minimum or s-cis means nothing. */
  readonly difference: number | null;
  readonly sCisFraction: number | null;
  readonly planarSCisCost: number | null;
  readonly barrier: number | null;
  readonly twist: number | null;
  readonly inRing: boolean;
  readonly temperature: number;
  /** False when time ran out before the bond's scan was through. */
  readonly complete?: boolean | undefined;
}

export function conjugationSentence(facts: ConjugationFacts, unit: EnergyUnit): string {
  const { bond, difference, sCisFraction, planarSCisCost, barrier, twist, inRing, temperature } =
    facts;
  const end = facts.complete === false ? `; ${unfinishedScan}.` : '.';
  const turn = barrier === null ? '' : `; ${energyText(barrier, unit)} to turn`;
  if (inRing) {
    return twist === null
      ? `${bond} is part of a ring${end}`
      : `${bond} is part of a ring and twisted by ${Math.round(twist)}° from planar${end}`;
  }
  if (difference === null || sCisFraction === null) {
    return twist === null
      ? `${bond} is conjugated${turn}${end}`
      : `${bond} is twisted by ${Math.round(twist)}° from planar in its lowest form${turn}${end}`;
  }
  const preferred = difference >= 0 ? 's-trans' : 's-cis';
  const planar =
    planarSCisCost === null ? '' : `; planar s-cis costs ${energyText(planarSCisCost, unit)}`;
  return `${bond}: ${preferred} is preferred by ${energyText(Math.abs(difference), unit)}; ${percent(sCisFraction)} s-cis at ${celsius(temperature)}${turn}${planar}${end}`;
}

export interface StrainFacts {
  readonly model: string;
  readonly strain: number;
  readonly worst: { readonly bond: string; readonly strain: number } | null;
  readonly complete: boolean;
}

export function strainSentence(
  { model, strain, worst, complete }: StrainFacts,
  unit: EnergyUnit,
): string {
  const most =
    worst && worst.strain >= 0.05
      ? `; ${worst.bond} carries most of it, ${energyText(worst.strain, unit)}`
      : '';
  const search = complete
    ? ''
    : '; the search for the lowest conformer was not complete, so the strain may be larger';
  return `The uploaded geometry is strained by ${energyText(strain, unit)} (${model})${most}${search}.`;
}

export interface ScanFacts {
  /** The bond turned, as people name it. */
  readonly bond: string;
  readonly reading: Pick<ProfileReading, 'forms' | 'turn' | 'temperature'>;
  readonly relaxed: boolean;
  readonly complete: boolean;
  /** Whether all its stationary points converged. */
  readonly converged: boolean;
}

/** What each stability class says about separating the two sides of an axis. */
const separation = {
  1: 'too fast to separate the forms (class 1)',
  2: 'slow, but a mixture that changes with time (class 2)',
  3: 'slow enough to separate the forms (class 3)',
} as const;
/** Barriers in kcal/mol between the classes, and how near to one the model's error makes the class uncertain. */
const CLASS_BORDERS = [20, 30];
const MODEL_ERROR = 2;

/** Which form is preferred, by how much and how many there are of it; what a turn costs, and how long it takes. */
export function scanSentence(facts: ScanFacts, unit: EnergyUnit): string {
  const { bond, reading, relaxed, complete, converged } = facts;
  const parts = [
    relaxed ? '' : 'rigid profile, in which nothing else relaxed',
    complete ? '' : unfinishedScan,
    converged ? '' : 'some stationary points did not converge',
  ].filter(Boolean);
  const caveats = parts.length > 0 ? `; ${parts.join('; ')}` : '';
  return `${bond}: ${formsText(reading, unit)}${turnText(reading, unit)}${caveats}.`;
}

function formsText({ forms, temperature }: ScanFacts['reading'], unit: EnergyUnit): string {
  const [first, second] = forms;
  if (!first) return 'no minimum was found';
  const named = ({ label, angles }: Form): string => `${label} (${anglesText(angles)})`;
  if (!second) return `${named(first)} is the only form`;
  const known = first.population > 0 || second.population > 0;
  const share = known
    ? `; ${percent(first.population)}${first.free === null ? '' : ' by ΔE'} at ${celsius(temperature)}`
    : '';
  const gap = second.relative - first.relative;
  if (first.free === null || second.free === null) {
    return `${named(first)} is preferred by ${energyText(gap, unit)} over ${named(second)}${share}`;
  }
  const freeGap = energyText(second.free - first.free, unit).replace('-', '−');
  return `${named(first)} is preferred over ${named(second)} by ΔE ${energyText(gap, unit)}, ΔG ${freeGap}${share}`;
}

function turnText({ turn }: ScanFacts['reading'], unit: EnergyUnit): string {
  if (!turn) return '';
  const { barrier, rate, halfLife, stability, free } = turn;
  const isNearBorder = CLASS_BORDERS.some((border) => Math.abs(barrier - border) < MODEL_ERROR);
  const doubt = isNearBorder ? ', though within the model’s error of the next class' : '';
  if (free) {
    return `; ΔG‡ ${energyText(free.barrier, unit)} to turn (ΔE‡ ${energyText(barrier, unit)}), ${rateText(free.rate)} and half-life ${duration(free.halfLife)} by ΔG‡; by ΔE‡ ${separation[stability]}${doubt}`;
  }
  return `; ${energyText(barrier, unit)} to turn, ${rateText(rate)}, half-life ${duration(halfLife)} with ΔE‡ for ΔG‡, ${separation[stability]}${doubt}`;
}
