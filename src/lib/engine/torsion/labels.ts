/** Names of the stationary points of a torsion profile, in the terms of the trade. */
import { torsion } from '../geometry';
import type { BondCharacter } from './bond-character';
import { torsionRange } from './klyne-prelog';
import type { TorsionRange } from './klyne-prelog';

export type StationaryKind = 'minimum' | 'maximum';

/** A conjugated system within this of planar is called planar, and within this of 90 perpendicular; degrees. */
const PLANAR_WITHIN = 15;
/** A front and a rear substituent nearer than this, seen along the bond, eclipse each other; degrees. */
const ECLIPSED_WITHIN = 30;

const rangeWords: Record<TorsionRange, string> = {
  sp: 'synperiplanar',
  sc: 'synclinal',
  ac: 'anticlinal',
  ap: 'antiperiplanar',
};

/**
 * Names a geometry (Å, 3N). Saturated bonds: eclipsed or staggered by the smallest angle between a front and a rear
 * substituent, and anti or gauche for minima. Between double bonds: s-cis and s-trans, planar only within 15 degrees, and a
 * twisted s-cis minimum gauche. Amides and esters: Z and E. Else planar, twisted, perpendicular, or the Klyne-Prelog range.
 */
export function labelGeometry(
  character: BondCharacter,
  x: Float64Array,
  kind: StationaryKind,
): string {
  if (character.kind === 'saturated') return saturatedLabel(character, x, kind);
  const angle = torsion(x, ...character.reference);
  if (character.kind === 'diene') return dieneLabel(angle, kind);
  if (character.kind === 'acyl') return acylLabel(angle, kind);
  return character.kind === 'planar' ? planarity(angle) : rangeWords[torsionRange(angle)];
}

function saturatedLabel(
  { bond: [j, k], fronts, rears, reference }: Extract<BondCharacter, { kind: 'saturated' }>,
  x: Float64Array,
  kind: StationaryKind,
): string {
  let smallest = 180;
  for (const front of fronts) {
    for (const rear of rears)
      smallest = Math.min(smallest, Math.abs(torsion(x, front, j, k, rear)));
  }
  if (smallest < ECLIPSED_WITHIN) return 'eclipsed';
  if (kind === 'minimum' && !reference) return 'staggered';
  const size = Math.abs(torsion(x, ...(reference ?? [fronts[0], j, k, rears[0]])));
  if (kind === 'maximum') return rangeWords[torsionRange(size)];
  if (size > 150) return 'anti';
  return size < 100 ? 'gauche' : 'staggered';
}

function dieneLabel(angle: number, kind: StationaryKind): string {
  const side = Math.abs(angle) < 90 ? 's-cis' : 's-trans';
  const planar = planarity(angle);
  if (planar === 'planar') return `planar ${side}`;
  if (kind === 'minimum' && side === 's-cis') return 'gauche (skew)';
  return planar === 'perpendicular' ? planar : `twisted ${side}`;
}

function acylLabel(angle: number, kind: StationaryKind): string {
  const side = Math.abs(angle) < 90 ? 'Z' : 'E';
  if (kind === 'minimum') return side;
  const planar = planarity(angle);
  return planar === 'perpendicular' ? planar : `${planar} ${side}`;
}

/** Planar, perpendicular, or twisted in between. */
function planarity(angle: number): string {
  const size = Math.abs(angle);
  const twist = Math.min(size, 180 - size);
  if (twist <= PLANAR_WITHIN) return 'planar';
  return twist >= 90 - PLANAR_WITHIN ? 'perpendicular' : 'twisted';
}
