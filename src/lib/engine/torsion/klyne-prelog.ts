/** Conformational terms for a torsion angle after Klyne and Prelog, as in IUPAC (Pure Appl. Chem. 1996, 68, 2193). */
import { wrapDegrees } from '../units';

export type TorsionRange = 'sp' | 'sc' | 'ac' | 'ap';

/** Parts of a degree that a range is told by: a torsion held at 90 is 90 whatever its last digits. */
const RESOLUTION = 1e4;

/**
 * The range of a torsion angle in degrees: synperiplanar up to 30, synclinal to 90, anticlinal to 150,
 * antiperiplanar to 180.
 */
export function torsionRange(angle: number): TorsionRange {
  const size = Math.round(Math.abs(wrapDegrees(angle)) * RESOLUTION) / RESOLUTION;
  if (size <= 30) return 'sp';
  if (size <= 90) return 'sc';
  return size <= 150 ? 'ac' : 'ap';
}

/** The term with its sign where the sign means something: "+sc", "-ac"; "sp" and "ap" within half a degree of planar. */
export function klynePrelog(angle: number): string {
  const wrapped = wrapDegrees(angle);
  const size = Math.abs(wrapped);
  const range = torsionRange(wrapped);
  if (size < 0.5 || size > 179.5) return range;
  return `${wrapped > 0 ? '+' : '-'}${range}`;
}
