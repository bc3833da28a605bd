/** The answer of a map of two bonds in a sentence. Energies in kcal/mol, told in the unit asked for. */
import { energyText, type EnergyUnit } from './energy-units';

export interface MapFacts {
  readonly minima: number;
  /** What the lowest minimum is called at either bond; null without a minimum. */
  readonly lowest: readonly string[] | null;
  /** The lowest way between two minima; null where there is none to tell of. */
  readonly way: {
    readonly from: string;
    readonly to: string;
    readonly up: number;
    readonly back: number;
  } | null;
  readonly complete: boolean;
}

export function mapSentence({ minima, lowest, way, complete }: MapFacts, unit: EnergyUnit): string {
  const search = complete ? '' : ' The map ran out of time, so it may miss lower forms.';
  if (!lowest) return `No minimum was found.${search}`;
  const [first, second] = lowest;
  const names = first === second ? `${first} at both bonds` : `${first} and ${second}`;
  const count = minima === 1 ? 'The only minimum' : `${minima} minima; the lowest, A,`;
  const path = way
    ? ` The lowest way from ${way.from} to ${way.to} climbs ${energyText(way.up, unit)}, and ${energyText(way.back, unit)} on the way back, to within the steps of the grid.`
    : '';
  return `${count} is ${names}.${path}${search}`;
}
