/** What must hold for every molecule, angle and temperature (fast-check, seeds fixed). */
import fc from 'fast-check';
import { Molecule as OpenchemlibMolecule } from 'openchemlib';
import { describe, expect, it } from 'vitest';
import { createForceField } from '$lib/engine/forcefield/create';
import { rotateAbout, torsion } from '$lib/engine/geometry';
import { readMolecule } from '$lib/engine/molecule/read';
import { boltzmannPopulations } from '$lib/engine/thermo/boltzmann';
import { turnBetween, wrapDegrees } from '$lib/engine/units';
import { compute } from '../support/compute';
import { renumberMolfile } from '../support/molfile';
import { coveredMolecules } from './recorded-geometries';

const anyMolecule = fc.constantFrom(...coveredMolecules);
const seeded = (numRuns: number): fc.Parameters<unknown> => ({ seed: 20240611, numRuns });

function energyOf(molfile: string, coordinates: ArrayLike<number>): number {
  const x = Float64Array.from(coordinates);
  return createForceField(readMolecule({ molfile })).energy(x, new Float64Array(x.length));
}

/** Turns and shifts a geometry as one body: a rotation by a unit quaternion, then a translation. */
function moved(x: readonly number[], quaternion: readonly number[], shift: readonly number[]) {
  const length = Math.hypot(...quaternion);
  const [w, a, b, c] = quaternion.map((part) => part / length);
  const rows = [
    [1 - 2 * (b * b + c * c), 2 * (a * b - c * w), 2 * (a * c + b * w)],
    [2 * (a * b + c * w), 1 - 2 * (a * a + c * c), 2 * (b * c - a * w)],
    [2 * (a * c - b * w), 2 * (b * c + a * w), 1 - 2 * (a * a + b * b)],
  ];
  return Float64Array.from(x, (_, n) => {
    const at = n - (n % 3);
    const row = rows[n % 3];
    return row[0] * x[at] + row[1] * x[at + 1] + row[2] * x[at + 2] + shift[n % 3];
  });
}

/** ms; some seconds of work, on however busy a machine. */
const PATIENCE = 300_000;

/** A random order of n atoms. */
const orderOf = (n: number) =>
  fc.shuffledSubarray(
    Array.from({ length: n }, (_, i) => i),
    { minLength: n, maxLength: n },
  );

describe('the energy', () => {
  const component = fc.double({ min: -1, max: 1, noNaN: true });
  const quaternion = fc
    .tuple(component, component, component, component)
    .filter((parts) => Math.hypot(...parts) > 0.1);
  const shift = fc.array(fc.double({ min: -50, max: 50, noNaN: true }), {
    minLength: 3,
    maxLength: 3,
  });

  it('does not change when the molecule is turned and shifted', () => {
    fc.assert(
      fc.property(anyMolecule, quaternion, shift, ({ molfile, coordinates }, turn, by) => {
        const energy = energyOf(molfile, coordinates);
        const after = energyOf(molfile, moved(coordinates, turn, by));
        expect(Math.abs(after - energy)).toBeLessThan(1e-8 * Math.max(1, Math.abs(energy)));
      }),
      seeded(150),
    );
  });

  it('does not change when the atoms are numbered otherwise', () => {
    const renumbered = anyMolecule.chain((molecule) =>
      fc.tuple(fc.constant(molecule), orderOf(molecule.coordinates.length / 3)),
    );
    fc.assert(
      fc.property(renumbered, ([{ molfile, coordinates }, order]) => {
        const places = order.flatMap((old) => coordinates.slice(3 * old, 3 * old + 3));
        const energy = energyOf(molfile, coordinates);
        const after = energyOf(renumberMolfile(molfile, order), places);
        expect(Math.abs(after - energy)).toBeLessThan(1e-8 * Math.max(1, Math.abs(energy)));
      }),
      seeded(150),
    );
  });
});

describe('conformers', () => {
  const stereo = fc.constantFrom(
    'C[C@H](N)C(=O)O',
    'C[C@@H](N)C(=O)O',
    'C/C=C/C=C\\C',
    'OC(=O)/C=C/C(=O)O',
    'OC(=O)/C=C\\C(=O)O',
    'C[C@H]1CCCC[C@@H]1O',
    'C[C@@H]1CC[C@H](C)CC1',
    'C[C@H](O)[C@@H](F)Cl',
    'C/C(=N/O)C',
    'C[S@](=O)CC',
    'OC[C@H]1O[C@@H](O)[C@H](O)[C@@H](O)[C@@H]1O',
    'CC(=O)N[C@@H](C)C(=O)NC',
  );

  it(
    'keep their stereocenters and double bonds, and share the whole population',
    async () => {
      await fc.assert(
        fc.asyncProperty(stereo, fc.integer({ min: 1, max: 1000 }), async (smiles, seed) => {
          const result = await compute({ smiles }, 'conformers', { seed, effort: 'quick' });
          const expected = OpenchemlibMolecule.fromSmiles(smiles).getIDCode();
          for (const { molfile } of result.conformers) {
            expect(OpenchemlibMolecule.fromMolfile(molfile).getIDCode()).toBe(expected);
            expect(readMolecule({ molfile }).smiles).toBe(readMolecule({ smiles }).smiles);
          }
          const total = result.conformers.reduce((sum, { population }) => sum + population, 0);
          expect(Math.abs(total - 1)).toBeLessThan(1e-9);
        }),
        seeded(12),
      );
    },
    PATIENCE,
  );
});

describe('Boltzmann populations', () => {
  it('sum to 1, none negative, whatever the zero of the energies', () => {
    const state = fc.tuple(
      fc.double({ min: -1e4, max: 1e4, noNaN: true }),
      fc.integer({ min: 1, max: 24 }),
    );
    fc.assert(
      fc.property(
        fc.array(state, { minLength: 1, maxLength: 40 }),
        fc.double({ min: 10, max: 3000, noNaN: true }),
        (states, temperature) => {
          const populations = boltzmannPopulations(
            states.map(([energy]) => energy),
            states.map(([, degeneracy]) => degeneracy),
            temperature,
          );
          const total = populations.reduce((sum, population) => sum + population, 0);
          expect(Math.abs(total - 1)).toBeLessThan(1e-12);
          expect(Math.min(...populations)).toBeGreaterThanOrEqual(0);
        },
      ),
      seeded(500),
    );
  });
});

describe('angles', () => {
  const anyAngle = fc.double({ min: -1e5, max: 1e5, noNaN: true });

  it('wrap into (-180, 180] and stay the same direction', () => {
    fc.assert(
      fc.property(anyAngle, (angle) => {
        const wrapped = wrapDegrees(angle);
        expect(wrapped).toBeGreaterThan(-180);
        expect(wrapped).toBeLessThanOrEqual(180);
        const turns = (angle - wrapped) / 360;
        expect(Math.abs(turns - Math.round(turns))).toBeLessThan(1e-9);
      }),
      {
        ...seeded(1000),
        examples: [[180], [-180], [540], [-540], [0], [-0], [179.99999999999997]],
      },
    );
  });

  it('differ by the shortest turn, which leads from one to the other', () => {
    fc.assert(
      fc.property(anyAngle, anyAngle, (from, to) => {
        const turn = turnBetween(from, to);
        expect(Math.abs(turn)).toBeLessThanOrEqual(180);
        expect(Math.abs(turnBetween(wrapDegrees(from + turn), wrapDegrees(to)))).toBeLessThan(1e-6);
      }),
      seeded(1000),
    );
  });

  it('of torsions follow a turn about their bond', () => {
    const place = fc.array(fc.double({ min: -2, max: 2, noNaN: true }), {
      minLength: 12,
      maxLength: 12,
    });
    fc.assert(
      fc.property(place, fc.double({ min: -720, max: 720, noNaN: true }), (places, turn) => {
        const x = Float64Array.from(places);
        const before = torsion(x, 0, 1, 2, 3);
        // Three atoms in a line, or two in one place, have no torsion.
        fc.pre(isClearTorsion(x));
        rotateAbout(x, [3], 1, 2, turn);
        expect(Math.abs(turnBetween(before + turn, torsion(x, 0, 1, 2, 3)))).toBeLessThan(1e-6);
      }),
      seeded(500),
    );
  });
});

function isClearTorsion(x: Float64Array): boolean {
  const turned = x.slice();
  // A quarter turn of either end must move it.
  rotateAbout(turned, [0, 3], 1, 2, 90);
  const movement = (atom: number): number =>
    Math.hypot(...[0, 1, 2].map((p) => turned[3 * atom + p] - x[3 * atom + p]));
  return movement(0) > 0.1 && movement(3) > 0.1;
}

describe('a profile', () => {
  const bonds: { smiles: string; torsion: [number, number, number, number] }[] = [
    { smiles: 'CCCC', torsion: [0, 1, 2, 3] },
    { smiles: 'C=CC(=C)C', torsion: [0, 1, 2, 4] },
    { smiles: 'COC(C)=O', torsion: [0, 1, 2, 3] },
    { smiles: 'OCCF', torsion: [0, 1, 2, 3] },
  ];

  it('does not depend on how the atoms are numbered', async () => {
    await fc.assert(
      fc.asyncProperty(
        fc.constantFrom(...bonds),
        fc.infiniteStream(fc.integer({ min: 0, max: 1e6 })),
        async ({ smiles, torsion: atoms }, keys) => {
          const { molfile } = await compute({ smiles }, 'minimize', {});
          const atomCount = readMolecule({ smiles }).atomCount;
          const order = Array.from({ length: atomCount }, (_, atom) => ({
            atom,
            key: keys.next().value as number,
          }))
            .sort((a, b) => a.key - b.key)
            .map(({ atom }) => atom);
          const renamed = atoms.map((atom) => order.indexOf(atom)) as typeof atoms;
          const plain = await compute({ molfile }, 'scan', { torsion: atoms });
          const other = await compute({ molfile: renumberMolfile(molfile, order) }, 'scan', {
            torsion: renamed,
          });
          expect(other.points.length).toBe(plain.points.length);
          plain.points.forEach(({ angle, relative }, n) => {
            expect(other.points[n].angle).toBe(angle);
            expect(Math.abs(other.points[n].relative - relative)).toBeLessThan(0.02);
          });
        },
      ),
      seeded(8),
    );
  });
});
