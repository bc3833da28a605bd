/** What a task is likely to cost, for the price that is shown before queueing. */
import type { Plan } from './submission';

export interface CostedMolecule {
  readonly atomCount: number;
  readonly rotorCount: number;
}

type Kind = Exclude<keyof Plan, 'scans' | 'maps'> | 'scan' | 'map';

/** Degrees between two cells of a map, where the settings say nothing else. */
const USUAL_MAP_STEP = 30;

/**
 * Seconds of one core, fitted by eye to tasks of 10 to 80 atoms on a 2-core machine: an evaluation grows with the square
 * of the atoms, a search with the number of rotors, a map with the number of its cells. Good to a factor of two or three.
 */
export function likelySeconds(
  kind: Kind,
  { atomCount, rotorCount }: CostedMolecule,
  { step = USUAL_MAP_STEP }: { readonly step?: number } = {},
): number {
  const evaluation = (atomCount / 30) ** 2;
  switch (kind) {
    case 'conformers':
      return 0.3 + evaluation * (0.3 + 0.8 * rotorCount);
    case 'scan':
      return 0.3 + evaluation * (0.6 + 0.4 * rotorCount);
    case 'map':
      return 0.5 + (1.5 + 4 * evaluation) * (USUAL_MAP_STEP / step) ** 2;
    case 'conjugation':
      return 0.5 + evaluation * (1 + 0.8 * rotorCount);
    case 'strain':
      return 0.5 + evaluation * (1 + 1.2 * rotorCount);
  }
}

/** A length of time in words, rounded as an estimate is. */
export function aboutTime(seconds: number): string {
  if (seconds < 60) return 'less than a minute';
  const minutes = Math.round(seconds / 60);
  if (minutes < 90) return minutes === 1 ? 'about a minute' : `about ${minutes} minutes`;
  const hours = seconds / 3600;
  return hours < 36 ? `about ${Math.round(hours)} hours` : `about ${Math.round(hours / 24)} days`;
}
