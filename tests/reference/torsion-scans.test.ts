/**
 * Relaxed scans against RDKit 2022.09.3's (data/torsion-scans.py: best of several starts, both directions), and the
 * properties a profile must have by itself: no hysteresis, mirror symmetry, minima that are minima.
 */
import { readFileSync } from 'node:fs';
import { beforeAll, describe, expect, it } from 'vitest';
import { unattended } from '$lib/engine/control';
import { createForceField } from '$lib/engine/forcefield/create';
import type { ForceField } from '$lib/engine/forcefield/forcefield';
import { torsion as torsionAngle } from '$lib/engine/geometry';
import { minimize } from '$lib/engine/minimizer/minimize';
import { torsionRestraint } from '$lib/engine/minimizer/restraints';
import { readMolecule } from '$lib/engine/molecule/read';
import { turnBetween } from '$lib/engine/units';
import type { Result } from '$lib/engine/tasks/result';
import { compute } from '../support/compute';
import { isPositiveDefinite, numericalHessian } from '../support/positive-definite';

interface RecordedScan {
  name: string;
  smiles: string;
  torsion: [number, number, number, number];
  molfile: string;
  points: { angle: number; energy: number }[];
}

type Scan = Result<'scan'>;

/** kcal/mol: how far a grid energy may lie above RDKit's. */
const ABOVE = 0.02;
/** kcal/mol: forward against backward, and one side against its mirror image. */
const SAME = 0.02;
/** Degrees by which a restrained torsion may miss its target. */
const REACHED = 0.1;
/** kcal/mol/Å²: softer than any real mode, far above the noise of the six that are none. */
const NO_CURVATURE = 2e-3;

const { scans } = JSON.parse(
  readFileSync(new URL('./data/torsion-scans.json', import.meta.url), 'utf8'),
) as { scans: RecordedScan[] };

/** Values the method expects, kcal/mol: MMFF94s, the same from RDKit and openchemlib. */
const expectedHeights: Record<string, { at: number; relative: number }[]> = {
  ethane: [{ at: 0, relative: 3.215 }],
  butane: [
    { at: 65, relative: 0.78 },
    { at: 120, relative: 3.96 },
    { at: 0, relative: 5.21 },
  ],
  'buta-1,3-diene': [
    { at: 45, relative: 2.47 },
    { at: 0, relative: 3.43 },
    { at: 104, relative: 6.18 },
  ],
};

function coordinatesIn(molfile: string): Float64Array {
  return Float64Array.from(readMolecule({ molfile }).coordinates!);
}

function pointAt(scan: Scan, angle: number): Scan['points'][number] {
  return scan.points.find((point) => Math.abs(turnBetween(point.angle, angle)) < 1e-6)!;
}

/** Relaxes with the torsion held at `target`, in place; the energy leaves the restraint out. */
async function relaxAt(
  forceField: ForceField,
  atoms: readonly number[],
  target: number,
  x: Float64Array,
) {
  const restraint = torsionRestraint(atoms, target);
  await minimize(
    (at, gradient) => forceField.energy(at, gradient) + restraint.energy(at, gradient),
    x,
    {
      gradientRms: 0.001,
      maxEvaluations: 5000,
      curvature: (at, hessian) => {
        forceField.curvature(at, hessian);
        restraint.curvature(at, hessian);
      },
    },
    unattended,
  );
  return forceField.energy(x, new Float64Array(x.length));
}

describe.each(scans)('relaxed scan of $name', ({ name, torsion, molfile, points }) => {
  const molecule = readMolecule({ molfile });
  const forceField = createForceField(molecule);
  let scan: Scan;

  beforeAll(async () => {
    scan = await compute({ molfile }, 'scan', { torsion });
  });

  it('holds its torsion and never lies above the recorded energies', () => {
    expect(scan.points.map(({ angle }) => angle)).toEqual(points.map(({ angle }) => angle));
    for (const point of scan.points) {
      const recorded = points.find(({ angle }) => angle === point.angle)!;
      expect(Math.abs(turnBetween(point.angle, point.reached))).toBeLessThanOrEqual(REACHED);
      expect(point.energy, `at ${point.angle}`).toBeLessThanOrEqual(recorded.energy + ABOVE);
    }
  });

  it('returns geometries that have the angle and the energy it says', () => {
    for (const point of scan.points) {
      const x = coordinatesIn(point.molfile);
      expect(Math.abs(turnBetween(point.angle, torsionAngle(x, ...torsion)))).toBeLessThanOrEqual(
        2 * REACHED,
      );
      // A molfile keeps four decimals, which costs some hundredths of a kcal/mol at most.
      const energy = forceField.energy(x, new Float64Array(x.length));
      expect(Math.abs(energy - point.energy)).toBeLessThan(0.05);
    }
  });

  it('has no hysteresis: sweeping on from any of its points, either way, finds nothing lower', async () => {
    for (const direction of [1, -1]) {
      const x = coordinatesIn(scan.points.find(({ relative }) => relative === 0)!.molfile);
      let angle = scan.points.find(({ relative }) => relative === 0)!.angle;
      for (let n = 0; n < scan.points.length; n++) {
        angle = pointAt(scan, angle + 15 * direction).angle;
        const energy = await relaxAt(forceField, torsion, angle, x);
        expect(energy, `at ${angle}`).toBeGreaterThan(pointAt(scan, angle).energy - SAME);
        x.set(coordinatesIn(pointAt(scan, angle).molfile));
      }
    }
  });

  it('is the same read from the other end', async () => {
    const reversed = [...torsion].reverse() as RecordedScan['torsion'];
    const backward = await compute({ molfile }, 'scan', { torsion: reversed });
    for (const point of scan.points)
      expect(Math.abs(pointAt(backward, point.angle).energy - point.energy)).toBeLessThan(SAME);
  });

  it('is its own mirror image, as the molecule is', () => {
    for (const point of scan.points)
      expect(Math.abs(pointAt(scan, -point.angle).energy - point.energy)).toBeLessThan(SAME);
  });

  it('reports minima without negative curvature', async () => {
    const minima = scan.stationary.filter(({ kind }) => kind === 'minimum');
    expect(minima.length).toBeGreaterThan(0);
    const lowest = Math.min(...scan.points.map(({ energy }) => energy));
    for (const { angle, relative } of minima) {
      const nearest = [...scan.points].sort(
        (a, b) => Math.abs(turnBetween(angle, a.angle)) - Math.abs(turnBetween(angle, b.angle)),
      )[0];
      const x = coordinatesIn(nearest.molfile);
      await relaxAt(forceField, torsion, angle, x);
      const { converged } = await minimize(
        forceField.energy,
        x,
        { gradientRms: 1e-6, maxEvaluations: 5000, curvature: forceField.curvature },
        unattended,
      );
      expect(converged).toBe(true);
      expect(Math.abs(turnBetween(angle, torsionAngle(x, ...torsion)))).toBeLessThan(2);
      const energy = forceField.energy(x, new Float64Array(x.length));
      expect(energy - lowest, `minimum at ${angle}`).toBeLessThan(relative + SAME);
      const hessian = numericalHessian(forceField.energy, x);
      expect(isPositiveDefinite(hessian, x.length, NO_CURVATURE), `minimum at ${angle}`).toBe(true);
    }
  });

  it.each(expectedHeights[name] ?? [])(
    'has the height MMFF94s is known for at $at degrees',
    ({ at, relative }) => {
      const nearest = [...scan.stationary].sort(
        (a, b) => Math.abs(turnBetween(at, a.angle)) - Math.abs(turnBetween(at, b.angle)),
      )[0];
      expect(Math.abs(turnBetween(at, nearest.angle)), `near ${at}`).toBeLessThan(5);
      expect(Math.abs(nearest.relative - relative), `at ${at}`).toBeLessThan(0.015);
    },
  );
});
