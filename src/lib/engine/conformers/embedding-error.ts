/** The error function of distance geometry, in three dimensions and a fourth that lets atoms pass one another. */
import type { EnergyTerm } from '../energy-term';
import type { Molecule } from '../molecule/molecule';
import type { DistanceBounds } from './distance-bounds';
import { atomShapes } from './ideal-geometry';

/** Bounds on six times a tetrahedron's signed volume, (b - a) · ((c - a) × (d - a)), Å³. */
export interface VolumeBound {
  readonly atoms: readonly [number, number, number, number];
  readonly low: number;
  readonly high: number;
}

/** Numbers of the coordinate vector of an embedding: 3N, then N of the fourth dimension, filled up to a multiple of 3. */
export function embeddingSize(atomCount: number): number {
  return 3 * atomCount + 3 * Math.ceil(atomCount / 3);
}

/** Volumes at stereocentres (either sign, away from zero) and planar atoms (zero). */
export function volumeBounds(molecule: Molecule): VolumeBound[] {
  const bounds: VolumeBound[] = [];
  for (const { atom, neighbors, clockwise } of molecule.stereocenters) {
    const [a, b, c, d] = neighbors;
    // In place of a lone pair stands the center itself: it lies on the same side of the other three.
    const atoms = [a, b, c, d < 0 ? atom : d] as const;
    const least = d < 0 ? 0.8 : 2;
    bounds.push(clockwise ? { atoms, low: least, high: 100 } : { atoms, low: -100, high: -least });
  }
  atomShapes(molecule).forEach((shape, atom) => {
    const neighbors = molecule.neighbors[atom];
    if (shape !== 'planar' || neighbors.length !== 3) return;
    const [a, b, c] = neighbors;
    bounds.push({ atoms: [a.atom, b.atom, c.atom, atom], low: 0, high: 0 });
  });
  return bounds;
}

const VOLUME_WEIGHT = 0.05;

/**
 * Sum over pairs of (d²/u² - 1)² above the upper bound u and (2 l²/(l² + d²) - 1)² below the lower bound l (Havel,
 * Encyclopedia of Computational Chemistry 1998, 1, 723), plus squared volume violations, plus `fourthWeight` times
 * the squared fourth coordinates.
 */
export function embeddingError(
  atomCount: number,
  { lower, upper }: DistanceBounds,
  volumes: readonly VolumeBound[],
  fourthWeight: number,
): EnergyTerm {
  const w = 3 * atomCount;
  return (x, gradient) => {
    let error = 0;
    for (let i = 1; i < atomCount; i++) {
      const row = i * atomCount;
      const a = 3 * i;
      for (let j = 0; j < i; j++) {
        const b = 3 * j;
        const dx = x[a] - x[b];
        const dy = x[a + 1] - x[b + 1];
        const dz = x[a + 2] - x[b + 2];
        const dw = x[w + i] - x[w + j];
        const square = dx * dx + dy * dy + dz * dz + dw * dw;
        const high = upper[row + j] * upper[row + j];
        const low = lower[row + j] * lower[row + j];
        let slope: number;
        if (square > high) {
          const excess = square / high - 1;
          error += excess * excess;
          slope = (4 * excess) / high;
        } else if (square < low) {
          const sum = low + square;
          const lack = (2 * low) / sum - 1;
          error += lack * lack;
          slope = (-8 * lack * low) / (sum * sum);
        } else continue;
        gradient[a] += slope * dx;
        gradient[a + 1] += slope * dy;
        gradient[a + 2] += slope * dz;
        gradient[w + i] += slope * dw;
        gradient[b] -= slope * dx;
        gradient[b + 1] -= slope * dy;
        gradient[b + 2] -= slope * dz;
        gradient[w + j] -= slope * dw;
      }
    }
    for (const bound of volumes) error += volumeError(x, gradient, bound);
    for (let i = 0; i < atomCount; i++) {
      error += fourthWeight * x[w + i] * x[w + i];
      gradient[w + i] += 2 * fourthWeight * x[w + i];
    }
    return error;
  };
}

function volumeError(x: Float64Array, gradient: Float64Array, bound: VolumeBound): number {
  const { low, high } = bound;
  const [a, b, c, d] = bound.atoms;
  const ux = x[3 * b] - x[3 * a];
  const uy = x[3 * b + 1] - x[3 * a + 1];
  const uz = x[3 * b + 2] - x[3 * a + 2];
  const vx = x[3 * c] - x[3 * a];
  const vy = x[3 * c + 1] - x[3 * a + 1];
  const vz = x[3 * c + 2] - x[3 * a + 2];
  const wx = x[3 * d] - x[3 * a];
  const wy = x[3 * d + 1] - x[3 * a + 1];
  const wz = x[3 * d + 2] - x[3 * a + 2];
  const bx = vy * wz - vz * wy;
  const by = vz * wx - vx * wz;
  const bz = vx * wy - vy * wx;
  const volume = ux * bx + uy * by + uz * bz;
  const excess = volume < low ? volume - low : volume > high ? volume - high : 0;
  if (excess === 0) return 0;
  const slope = 2 * VOLUME_WEIGHT * excess;
  const cx = slope * (wy * uz - wz * uy);
  const cy = slope * (wz * ux - wx * uz);
  const cz = slope * (wx * uy - wy * ux);
  const dx = slope * (uy * vz - uz * vy);
  const dy = slope * (uz * vx - ux * vz);
  const dz = slope * (ux * vy - uy * vx);
  gradient[3 * b] += slope * bx;
  gradient[3 * b + 1] += slope * by;
  gradient[3 * b + 2] += slope * bz;
  gradient[3 * c] += cx;
  gradient[3 * c + 1] += cy;
  gradient[3 * c + 2] += cz;
  gradient[3 * d] += dx;
  gradient[3 * d + 1] += dy;
  gradient[3 * d + 2] += dz;
  gradient[3 * a] -= slope * bx + cx + dx;
  gradient[3 * a + 1] -= slope * by + cy + dy;
  gradient[3 * a + 2] -= slope * bz + cz + dz;
  return VOLUME_WEIGHT * excess * excess;
}
