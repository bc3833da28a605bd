/** Rigid scan: one side of one geometry turned, nothing relaxed. For comparison with the relaxed profile only. */
import type { ForceField } from '../forcefield/forcefield';
import { wrapDegrees } from '../units';
import type { BondCharacter } from './bond-character';
import { createGrid } from './grid';
import { klynePrelog } from './klyne-prelog';
import { labelGeometry } from './labels';
import type { StationaryKind } from './labels';
import { findLineMaximum } from './line-maximum';
import type { ScanPoint, ScanResult, StationaryPoint } from './scan-result';
import type { TorsionDrive } from './torsion-drive';

const ANGLE_TOLERANCE = 0.2;

/** Turns one side of a geometry (Å, 3N) through the circle. The geometry's own symmetry is all the profile has. */
export async function scanRigidly(
  forceField: ForceField,
  drive: TorsionDrive,
  geometry: Float64Array,
  step: number,
  character: BondCharacter,
): Promise<ScanResult> {
  const grid = createGrid(1, step, []);
  const unused = new Float64Array(geometry.length);
  const turned = (angle: number): { energy: number; coordinates: Float64Array } => {
    const coordinates = geometry.slice();
    drive.turnTo(coordinates, [angle]);
    return { energy: forceField.energy(coordinates, unused), coordinates };
  };
  const raw = Array.from({ length: grid.cellCount }, (_, cell) => {
    const [angle] = grid.angles(cell);
    return { angle, ...turned(angle) };
  });
  const lowest = Math.min(...raw.map(({ energy }) => energy));
  const points = raw.map((point): ScanPoint => ({
    ...point,
    relative: point.energy - lowest,
    reached: drive.measure(point.coordinates)[0],
    converged: true,
  }));

  const found: Omit<StationaryPoint, 'relative'>[] = [];
  for (const [kind, sign] of [
    ['minimum', -1],
    ['maximum', 1],
  ] satisfies [StationaryKind, number][]) {
    for (const bracket of bracketsOf(points, sign, step)) {
      const evaluate = async (at: number): Promise<number> => sign * turned(at).energy;
      const { at } = await findLineMaximum(evaluate, bracket, ANGLE_TOLERANCE);
      const angle = wrapDegrees(at);
      const { energy, coordinates } = turned(angle);
      const label = labelGeometry(character, coordinates, kind);
      const range = klynePrelog(angle);
      found.push({ kind, angle, energy, label, range, coordinates, converged: true });
    }
  }
  const floor = Math.min(...found.map(({ energy }) => energy));
  const stationary = found
    .map((point) => ({ ...point, relative: point.energy - floor }))
    .sort((a, b) => a.angle - b.angle);
  const symmetry = { mirror: false, period: 360 };
  const [torsion] = drive.torsions;
  return { torsion, relaxed: false, step, points, stationary, symmetry, complete: true };
}

type Bracket = Parameters<typeof findLineMaximum>[1];

/** Each grid point higher (for sign 1) than its neighbors, between them. */
function bracketsOf(points: readonly ScanPoint[], sign: number, step: number): Bracket[] {
  const count = points.length;
  return points.flatMap(({ angle, energy }, n): Bracket[] => {
    const before = sign * points[(n + count - 1) % count].energy;
    const after = sign * points[(n + 1) % count].energy;
    const top = sign * energy;
    // Of two equal neighbors only the first is the top.
    if (top <= before || top < after) return [];
    return [
      [
        { at: angle - step, value: before },
        { at: angle, value: top },
        { at: angle + step, value: after },
      ],
    ];
  });
}
