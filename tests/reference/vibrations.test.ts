/**
 * Frequencies against an outside Hessian (RDKit 2022.09.3, data/vibrations.py), what must hold of any, and free energies of
 * ethane and butane worked by hand from them.
 */
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { unattended } from '$lib/engine/control';
import { createForceField } from '$lib/engine/forcefield/create';
import { differenceHessian } from '$lib/engine/minimizer/hessian';
import { readMolecule } from '$lib/engine/molecule/read';
import { createRandom } from '$lib/engine/random';
import { vibrationalForm, vibrationsOf } from '$lib/engine/thermo/vibrations';
import { thermochemistry } from '$lib/engine/thermo/free-energy';
import type { Vibrations } from '$lib/engine/thermo/free-energy';
import { compute } from '../support/compute';

interface Recorded {
  readonly name: string;
  readonly smiles: string;
  readonly molfile: string;
  readonly coordinates: number[];
  readonly frequencies: number[];
}

const { molecules } = JSON.parse(
  readFileSync(new URL('./data/vibrations.json', import.meta.url), 'utf8'),
) as { molecules: Recorded[] };
const recorded = (name: string) => molecules.find((each) => each.name === name)!;

/** cm⁻¹; the largest difference found is 0.01, of the softest modes. */
const SAME_FREQUENCY = 0.05;

function fieldOf({ molfile }: Pick<Recorded, 'molfile'>) {
  return createForceField(readMolecule({ molfile }));
}

async function frequenciesAt(
  { molfile }: Pick<Recorded, 'molfile'>,
  x: Float64Array,
): Promise<Vibrations> {
  return vibrationsOf(await vibrationalForm(fieldOf({ molfile }), x, unattended));
}

describe.each(molecules)('the vibrations of $name', (each) => {
  const x = Float64Array.from(each.coordinates);

  it('are those of RDKit’s Hessian', async () => {
    const { frequencies } = await frequenciesAt(each, x);
    expect(frequencies).toHaveLength(each.frequencies.length);
    frequencies.forEach((frequency, n) =>
      expect(Math.abs(frequency - each.frequencies[n]), `mode ${n}`).toBeLessThan(SAME_FREQUENCY),
    );
  });

  it('do not change when the molecule is moved and turned', async () => {
    const still = await frequenciesAt(each, x);
    const moved = x.slice();
    const [cosine, sine] = [Math.cos(1.1), Math.sin(1.1)];
    for (let a = 0; a < x.length; a += 3) {
      const [px, py, pz] = [x[a], x[a + 1], x[a + 2]];
      moved.set([cosine * px - sine * pz + 5, py - 3, sine * px + cosine * pz + 0.7], a);
    }
    const turned = await frequenciesAt(each, moved);
    turned.frequencies.forEach((frequency, n) =>
      expect(Math.abs(frequency - still.frequencies[n])).toBeLessThan(0.02),
    );
    turned.moments.forEach((moment, n) => expect(moment).toBeCloseTo(still.moments[n], 4));
  });

  it('have the curvature that the energy has along any direction', async () => {
    const { energy } = fieldOf(each);
    const hessian = await differenceHessian(energy, x, unattended);
    const random = createRandom(3);
    const at = (direction: Float64Array, step: number) =>
      energy(
        x.map((value, a) => value + step * direction[a]),
        new Float64Array(x.length),
      );
    for (let n = 0; n < 5; n++) {
      const direction = x.map(() => random.uniform() - 0.5);
      const curvature = direction.reduce(
        (sum, value, a) =>
          sum + value * direction.reduce((s, other, b) => s + hessian[a * x.length + b] * other, 0),
        0,
      );
      const step = 1e-3;
      const difference =
        (at(direction, step) - 2 * at(direction, 0) + at(direction, -step)) / step ** 2;
      // The difference of energies errs by step² times a fourth derivative of some 1e4.
      expect(Math.abs(curvature - difference)).toBeLessThan(1e-4 * Math.abs(curvature) + 0.05);
    }
  });
});

describe('isotopes and order', () => {
  it('renumbering the atoms changes nothing', async () => {
    const forms = ['CC(=O)NC', 'CNC(C)=O'].map(async (smiles) => {
      const { conformers } = await compute({ smiles }, 'conformers', { effort: 'quick' });
      return conformers[0].vibrations.modes!.frequencies;
    });
    const [one, other] = await Promise.all(forms);
    // Each is minimized to 0.001 kcal/mol/Å on its own, which leaves the methyl groups' turns open by a little.
    one.forEach((frequency, n) => expect(Math.abs(frequency - other[n])).toBeLessThan(1.5));
  });

  it('deuterium slows the vibrations it takes part in, by at most √2', async () => {
    const light = recorded('ethane').frequencies;
    const heavy = recorded('ethane-1,1,1-d3');
    const { frequencies } = await frequenciesAt(heavy, Float64Array.from(heavy.coordinates));
    frequencies.forEach((frequency, n) => {
      expect(frequency).toBeLessThan(light[n] + 0.5);
      expect(frequency).toBeGreaterThan(light[n] / Math.SQRT2 - 0.5);
    });
  });
});

describe('ethane', () => {
  it('has a torsion near the observed 289 cm⁻¹ (from memory), and one imaginary mode at its barrier', async () => {
    const { stationary, crossings } = await compute({ smiles: 'CC' }, 'scan', {
      torsion: [2, 0, 1, 5],
    });
    for (const { kind, vibrations } of stationary) {
      const { frequencies } = vibrations!.modes!;
      expect(vibrations!.flaw).toBeNull();
      expect(frequencies).toHaveLength(18);
      expect(frequencies.filter((frequency) => frequency < 0)).toHaveLength(
        kind === 'maximum' ? 1 : 0,
      );
      // A model of single bonds in general; the barrier is 3.2 instead of 2.9 kcal/mol.
      if (kind === 'minimum') expect(Math.abs(frequencies[0] - 289)).toBeLessThan(45);
    }
    // Six ways over three equal barriers, all with the same ΔG‡; lower than ΔE‡, since the torsion's zero point is lost.
    expect(crossings).toHaveLength(6);
    for (const { barrier, free } of crossings) {
      expect(free!.barrier).toBeCloseTo(crossings[0].free!.barrier, 4);
      expect(barrier - free!.barrier).toBeGreaterThan(0.2);
      expect(barrier - free!.barrier).toBeLessThan(0.8);
    }
  });
});

// The hand calculation: own constants, own formulas (McQuarrie, Statistical Mechanics, chapter 8), SI units.
const h = 6.62607015e-34;
const k = 1.380649e-23;
const R = 8.314462618;
const c = 2.99792458e10;
const amu = 1.6605390666e-27;

/** G - E of the rigid rotor and harmonic oscillators at T and 1 bar, σ = 1, kcal/mol; and Grimme's change of it by hand. */
function byHand({ frequencies, moments, mass }: Vibrations, T: number) {
  const translation = ((2 * Math.PI * mass * amu * k * T) / h ** 2) ** 1.5 * ((k * T) / 1e5);
  const [A, B, C] = moments.map((moment) => moment * amu * 1e-20);
  const rotation =
    Math.sqrt(Math.PI) * ((8 * Math.PI ** 2 * k * T) / h ** 2) ** 1.5 * Math.sqrt(A * B * C);
  let oscillators = 0;
  let change = 0;
  for (const frequency of frequencies) {
    const theta = (h * c * frequency) / k;
    oscillators += R * (theta / 2) + R * T * Math.log(1 - Math.exp(-theta / T));
    const harmonic = theta / T / (Math.exp(theta / T) - 1) - Math.log(1 - Math.exp(-theta / T));
    const mu = h / (8 * Math.PI ** 2 * c * frequency);
    const average = (A + B + C) / 3;
    const reduced = 1 / (1 / mu + 1 / average);
    const rotor = 0.5 * (1 + Math.log((8 * Math.PI ** 3 * reduced * k * T) / h ** 2));
    change -= (R * T * (rotor - harmonic)) / (1 + (frequency / 100) ** 4);
  }
  const rigid = (-R * T * Math.log(translation * rotation) + oscillators) / 4184;
  return { rigid, quasi: rigid + change / 4184 };
}

describe('free energies by hand', () => {
  it.each(['ethane', 'butane, anti', 'butane, gauche'])('of %s', async (name) => {
    const each = recorded(name);
    const modes = await frequenciesAt(each, Float64Array.from(each.coordinates));
    const { rigid, quasi } = byHand(modes, 298.15);
    expect(thermochemistry(modes, 298.15).freeEnergy).toBeCloseTo(quasi, 5);
    // No mode of theirs is soft enough for the rotor to matter much.
    expect(Math.abs(quasi - rigid)).toBeLessThan(0.2);
  });

  it('of anti against gauche butane, with the search’s own numbers and degeneracies', async () => {
    const temperature = 298.15;
    const { conformers } = await compute({ smiles: 'CCCC' }, 'conformers', { temperature });
    const [anti, gauche] = conformers;
    expect([anti.degeneracy, gauche.degeneracy]).toEqual([1, 2]);
    const difference =
      gauche.energy -
      anti.energy +
      byHand(gauche.vibrations.modes!, temperature).quasi -
      byHand(anti.vibrations.modes!, temperature).quasi;
    expect(anti.freeEnergy).toBe(0);
    expect(gauche.freeEnergy).toBeCloseTo(difference, 4);
    // Symmetry counted once: RT ln 2 goes in through the two gauche forms, and not through σ = 2 of both.
    const weight = 2 * Math.exp((-difference * 4184) / (R * temperature));
    expect(gauche.freePopulation).toBeCloseTo(weight / (1 + weight), 5);
  });
});
