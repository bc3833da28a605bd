/** Thermochemistry against partition functions worked out by hand, in SI units and with formulas of this file's own. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { imaginaryModes, thermochemistry } from './free-energy';
import type { Vibrations } from './free-energy';
import { freePopulations, relativeFreeEnergies } from './shape-free-energies';
import type { Shape } from './shape-free-energies';

// CODATA 2018.
const h = 6.62607015e-34;
const k = 1.380649e-23;
const NA = 6.02214076e23;
const c = 2.99792458e10;
const amu = 1.6605390666e-27;
const kcal = 4184;

/** ln of the molecular partition function over N: translation at 1 bar, rotation with σ = 1, vibration from the bottom. */
function logPartition({ frequencies, moments, mass }: Vibrations, T: number): number {
  const volume = (k * T) / 1e5;
  const translation =
    1.5 * Math.log((2 * Math.PI * mass * amu * k * T) / (h * h)) + Math.log(volume);
  const axes = moments.map((moment) => (8 * Math.PI ** 2 * moment * amu * 1e-20 * k * T) / (h * h));
  const rotation =
    axes.length === 3
      ? 0.5 * Math.log(Math.PI * axes[0] * axes[1] * axes[2])
      : axes.length === 2
        ? Math.log(axes[0])
        : 0;
  const vibration = frequencies.reduce((sum, frequency) => {
    const x = (h * c * frequency) / (k * T);
    return sum - x / 2 - Math.log(1 - Math.exp(-x));
  }, 0);
  return translation + rotation + vibration;
}

/** G - E in kcal/mol: -RT ln(q/N), with H from T² d ln q/dT plus RT for pV. */
function handGibbs(vibrations: Vibrations, T: number): number {
  return (-NA * k * T * logPartition(vibrations, T)) / kcal;
}

function handEnthalpy(vibrations: Vibrations, T: number): number {
  const step = 1e-3 * T;
  // At constant volume the volume kT/p does not change with T.
  const slope =
    (logPartition(vibrations, T + step) - logPartition(vibrations, T - step)) / (2 * step);
  return (NA * k * T * (T * slope - 1) + NA * k * T) / kcal;
}

/** What Grimme's rotor changes in one mode's entropy, kcal/(mol K). */
function rotorChange(frequency: number, moments: readonly number[], T: number): number {
  const nu = c * frequency;
  const x = (h * nu) / (k * T);
  const oscillator = x / (Math.exp(x) - 1) - Math.log(1 - Math.exp(-x));
  const mu = h / (8 * Math.PI ** 2 * nu);
  const Bav = (moments.reduce((sum, moment) => sum + moment, 0) / 3) * amu * 1e-20;
  const reduced = (mu * Bav) / (mu + Bav);
  const rotor = 0.5 + Math.log(Math.sqrt((8 * Math.PI ** 3 * reduced * k * T) / (h * h)));
  const w = 1 / (1 + (100 / frequency) ** 4);
  return ((1 - w) * (rotor - oscillator) * NA * k) / kcal;
}

const stiff: Vibrations = {
  frequencies: [1500, 3000, 3100],
  moments: [0.64, 1.18, 1.81],
  mass: 18.015,
};
const linear: Vibrations = {
  frequencies: [667, 667, 1333, 2349],
  moments: [43.2, 43.2],
  mass: 44.009,
};
const soft: Vibrations = {
  frequencies: [25, 60, 110, 400, 900, 3000],
  moments: [50, 130, 170],
  mass: 73.1,
};

describe('thermochemistry', () => {
  it.each([
    ['a stiff molecule', stiff],
    ['a linear molecule', linear],
    ['a soft molecule', soft],
  ])(
    'is that of the partition function but for the rotors of soft modes: %s',
    (_name, vibrations) => {
      for (const T of [150, 298.15, 500]) {
        const { enthalpy, freeEnergy, entropy } = thermochemistry(vibrations, T);
        const changes = vibrations.frequencies.reduce(
          (sum, frequency) => sum + rotorChange(frequency, vibrations.moments, T),
          0,
        );
        expect(freeEnergy).toBeCloseTo(handGibbs(vibrations, T) - T * changes, 6);
        expect(enthalpy).toBeCloseTo(handEnthalpy(vibrations, T), 3);
        expect(enthalpy - T * entropy).toBeCloseTo(freeEnergy, 10);
      }
    },
  );

  it('gives the entropy of carbon dioxide', () => {
    // 213.79 J/(mol K) at 298.15 K and 1 bar (CODATA key values, 1989: 213.785); σ = 2 takes R ln 2 away.
    const entropy = thermochemistry(linear, 298.15).entropy * kcal - NA * k * Math.LN2;
    expect(entropy).toBeGreaterThan(213.5);
    expect(entropy).toBeLessThan(214.1);
  });

  it('stays finite for a mode that becomes free, and is smooth where its sign changes', () => {
    const withMode = (frequency: number) =>
      thermochemistry({ ...soft, frequencies: [frequency, ...soft.frequencies.slice(1)] }, 298.15);
    const limit = withMode(0).freeEnergy;
    expect(Number.isFinite(limit)).toBe(true);
    expect(withMode(0.01).freeEnergy).toBeCloseTo(limit, 6);
    expect(withMode(-1).freeEnergy).toBeCloseTo(withMode(1).freeEnergy, 10);
  });

  it('leaves an imaginary mode out and counts it', () => {
    const saddle = { ...soft, frequencies: [-300, ...soft.frequencies] };
    expect(imaginaryModes(saddle)).toBe(1);
    expect(imaginaryModes(soft)).toBe(0);
    expect(thermochemistry(saddle, 298.15)).toEqual(thermochemistry(soft, 298.15));
  });

  it('has an entropy that grows with temperature, dG/dT = -S', () => {
    fc.assert(
      fc.property(fc.double({ min: 50, max: 1500, noNaN: true }), (T) => {
        const step = 0.01;
        // With the rotor's entropy but the oscillator's enthalpy (as published) this holds where the modes are stiff.
        const ahead = thermochemistry(stiff, T + step).freeEnergy;
        const behind = thermochemistry(stiff, T - step).freeEnergy;
        const { entropy } = thermochemistry(stiff, T);
        expect(Math.abs((behind - ahead) / (2 * step) - entropy)).toBeLessThan(1e-5);
      }),
    );
  });
});

describe('free energies of shapes', () => {
  const shape = (
    energy: number,
    modes: Vibrations | null,
    flaw: NonNullable<Shape['vibrations']>['flaw'],
  ) => ({
    energy,
    degeneracy: 1,
    vibrations: { modes, flaw },
  });

  it('give populations by exp(-G/RT) and leave out what was left out', () => {
    const shapes = [
      shape(0, stiff, null),
      { ...shape(0.3, soft, null), degeneracy: 2 },
      shape(5, null, 'left-out'),
    ];
    const [first, second, third] = freePopulations(shapes, 298.15)!;
    const difference = 0.3 + handShift();
    const weight = 2 * Math.exp((-difference * kcal) / (NA * k * 298.15));
    expect(first).toBeCloseTo(1 / (1 + weight), 9);
    expect(second).toBeCloseTo(weight / (1 + weight), 9);
    expect(third).toBeNull();
    expect(relativeFreeEnergies(shapes, 298.15)[2]).toBeNull();

    function handShift(): number {
      return thermochemistry(soft, 298.15).freeEnergy - thermochemistry(stiff, 298.15).freeEnergy;
    }
  });

  it('give no shares where one that may matter has no free energy', () => {
    expect(
      freePopulations([shape(0, stiff, null), shape(1, soft, 'not-a-minimum')], 298),
    ).toBeNull();
    expect(freePopulations([shape(0, stiff, null), shape(1, null, 'no-time')], 298)).toBeNull();
    expect(freePopulations([{ energy: 0, degeneracy: 1 }], 298)).toBeNull();
    expect(freePopulations([], 298)).toBeNull();
  });

  it('count the rise of a saddle above the profile', () => {
    const top = { energy: 3, vibrations: { modes: stiff, flaw: null, rise: 0.5 } };
    const [, relative] = relativeFreeEnergies([shape(0, stiff, null), top], 298.15);
    expect(relative).toBeCloseTo(3.5, 10);
  });
});
