import { describe, expect, it } from 'vitest';
import { compute } from '../../../tests/support/compute';
import { anglesText, basinAt, nameAt, readProfile, type StoredProfile } from './profile-reading';

/** What the page is given of a scan. */
async function scanned(smiles: string, bond: [number, number], temperature: number) {
  const result = await compute({ smiles }, 'scan', { bond, step: 30, temperature });
  const all = [...result.points, ...result.stationary].map(({ energy }) => energy);
  const lowest = Math.min(...all);
  const profile: StoredProfile = {
    symmetry: result.symmetry,
    points: result.points.map(({ angle, energy }) => ({ angle, relative: energy - lowest })),
    stationary: result.stationary.map(({ kind, angle, energy, label, converged, vibrations }) => ({
      kind,
      angle,
      relative: energy - lowest,
      label,
      converged,
      vibrations,
    })),
  };
  return { result, profile };
}

describe('a profile read in the browser', () => {
  it('has the populations, barrier and half-lives that the computation gives', async () => {
    for (const temperature of [298.15, 450]) {
      const { result, profile } = await scanned('CCCC', [1, 2], temperature);
      const reading = readProfile(profile, temperature);
      expect(reading.basins).toHaveLength(result.basins.length);
      result.basins.forEach(({ population }, n) =>
        expect(reading.basins[n].population).toBeCloseTo(population, 9),
      );
      expect(reading.turn!.barrier).toBeCloseTo(result.interconversion!.barrier, 9);
      result.crossings.forEach((crossing, n) => {
        expect(reading.ways[n].halfLife / crossing.halfLife).toBeCloseTo(1, 6);
        expect(reading.ways[n].free!.barrier).toBeCloseTo(crossing.free!.barrier, 9);
      });
      expect(reading.turn!.free!.barrier).toBeCloseTo(result.interconversion!.free!.barrier, 9);
      result.freeEnergies.forEach((energy, n) =>
        expect(reading.freeEnergies![n]).toBeCloseTo(energy!, 9),
      );
    }
  });

  it('has no free energies where the computation gave none, or where a minimum is without', async () => {
    const { profile } = await scanned('CCCC', [1, 2], 298.15);
    const old = {
      ...profile,
      stationary: profile.stationary.map(({ vibrations: _vibrations, ...point }) => point),
    };
    const reading = readProfile(old, 298.15);
    expect(reading.freeEnergies).toBeNull();
    expect(reading.turn!.free).toBeNull();
    expect(reading.forms.every(({ free }) => free === null)).toBe(true);

    const flawed = {
      ...profile,
      stationary: profile.stationary.map((point) =>
        point.label === 'anti'
          ? { ...point, vibrations: { modes: null, flaw: 'no-time' as const } }
          : point,
      ),
    };
    const { freeEnergies, ways } = readProfile(flawed, 298.15);
    expect(freeEnergies!.every((energy) => energy === null)).toBe(true);
    // Between the gauche forms nothing is missing.
    expect(ways.some(({ free }) => free !== null)).toBe(true);
    expect(ways.some(({ free }) => free === null)).toBe(true);
  });

  it('joins mirrored minima to one form and names every angle', async () => {
    const { profile } = await scanned('CCCC', [1, 2], 298.15);
    const reading = readProfile(profile, 298.15);
    const [anti, gauche] = reading.forms;
    expect([anti.label, gauche.label]).toEqual(['anti', 'gauche']);
    expect(anglesText(anti.angles)).toBe('180°');
    expect(anglesText(gauche.angles)).toMatch(/^±6\d°$/);
    expect(anti.population + gauche.population).toBeCloseTo(1, 9);
    expect(nameAt(profile, reading, 0)).toBe('eclipsed');
    expect(nameAt(profile, reading, 40)).toBe('gauche');
    expect(nameAt(profile, reading, -170)).toBe('anti');
    expect(basinAt(reading, 170)).toBe(basinAt(reading, -170));
  });

  it('favors the lowest form the more, the colder it is', async () => {
    const { profile } = await scanned('CCCC', [1, 2], 298.15);
    const anti = [150, 298.15, 600].map(
      (kelvin) => readProfile(profile, kelvin).forms[0].population,
    );
    expect(anti[0]).toBeGreaterThan(anti[1]);
    expect(anti[1]).toBeGreaterThan(anti[2]);
  });
});

describe('angles in words', () => {
  it.each([
    [[180], '180°'],
    [[-65.2, 64.9], '±65°'],
    [[-135, -45, 45, 135], '±45° and ±135°'],
    [[-30], '−30°'],
    [[0, 120, -120], '0° and ±120°'],
  ])('%j is %s', (angles, text) => expect(anglesText(angles)).toBe(text));
});
