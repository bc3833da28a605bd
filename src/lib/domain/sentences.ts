/**
 * Answers in a sentence, made from the numbers of a result. Energies in
 * kcal/mol, told in the unit asked for; temperatures in K.
 */
import { energyText, type EnergyUnit } from './energy-units';

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

export interface ConformersFacts {
  readonly count: number;
  readonly window: number;
  readonly lowestPopulation: number;
  readonly temperature: number;
  readonly complete: boolean;
}

export function conformersSentence(facts: ConformersFacts, unit: EnergyUnit): string {
  const { count, window, lowestPopulation, temperature, complete } = facts;
  const search = complete
    ? ''
    : ' The search ended before its set stopped changing, so others may exist.';
  if (count === 1) return `One conformer within ${energyText(window, unit)}.${search}`;
  return `${count} conformers within ${energyText(window, unit)}; the lowest holds ${percent(lowestPopulation)} at ${celsius(temperature)}.${search}`;
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
}

export function conjugationSentence(facts: ConjugationFacts, unit: EnergyUnit): string {
  const { bond, difference, sCisFraction, planarSCisCost, barrier, twist, inRing, temperature } =
    facts;
  const turn = barrier === null ? '' : `; ${energyText(barrier, unit)} to turn`;
  if (inRing) {
    return twist === null
      ? `${bond} is part of a ring.`
      : `${bond} is part of a ring and twisted by ${Math.round(twist)}° from planar.`;
  }
  if (difference === null || sCisFraction === null) {
    return twist === null
      ? `${bond} is conjugated${turn}.`
      : `${bond} is twisted by ${Math.round(twist)}° from planar in its lowest form${turn}.`;
  }
  const preferred = difference >= 0 ? 's-trans' : 's-cis';
  const planar =
    planarSCisCost === null ? '' : `; planar s-cis costs ${energyText(planarSCisCost, unit)}`;
  return `${bond}: ${preferred} is preferred by ${energyText(Math.abs(difference), unit)}; ${percent(sCisFraction)} s-cis at ${celsius(temperature)}${turn}${planar}.`;
}

export interface StrainFacts {
  readonly strain: number;
  readonly worst: { readonly bond: string; readonly strain: number } | null;
  readonly complete: boolean;
}

export function strainSentence({ strain, worst, complete }: StrainFacts, unit: EnergyUnit): string {
  const most =
    worst && worst.strain >= 0.05
      ? `; ${worst.bond} carries most of it, ${energyText(worst.strain, unit)}`
      : '';
  const search = complete
    ? ''
    : ' The search for the lowest conformer was not complete, so the strain may be larger.';
  return `The uploaded geometry is strained by ${energyText(strain, unit)}${most}.${search}`;
}

export interface ScanFacts {
  readonly torsion: string;
  readonly preferred: { readonly label: string; readonly angle: number } | null;
  readonly barrier: number | null;
  readonly halfLife: number | null;
  readonly temperature: number;
  readonly relaxed: boolean;
  readonly complete: boolean;
}

export function scanSentence(facts: ScanFacts, unit: EnergyUnit): string {
  const { torsion, preferred, barrier, halfLife, temperature, relaxed, complete } = facts;
  const form = preferred
    ? `${preferred.label} at ${Math.round(preferred.angle)}° is lowest`
    : 'no minimum was found';
  const highest = barrier === null ? '' : `; the highest barrier is ${energyText(barrier, unit)}`;
  const life =
    halfLife === null
      ? ''
      : ` (half-life ${duration(halfLife)} at ${celsius(temperature)}, with ΔE‡ for ΔG‡)`;
  const caveat = [
    relaxed ? '' : ' Rigid profile: nothing else relaxed.',
    complete ? '' : ' The scan ran out of time.',
  ];
  return `${torsion}: ${form}${highest}${life}.${caveat.join('')}`;
}
