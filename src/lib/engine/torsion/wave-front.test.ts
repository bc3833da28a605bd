import { describe, expect, it } from 'vitest';
import { unattended } from '../control';
import type { Control } from '../control';
import { createWave } from './wave-front';
import type { Start } from './wave-front';

/*
 * A toy with hysteresis: beside the driven angle a hidden coordinate y has two wells at about -1 and 1, tilted by the
 * angle. y = 1 is lower from 0 to 180 and y = -1 from -180 to 0, but each well lives on, so that a single drive stays in
 * the well it began in.
 */
const count = 24;
const angleOf = (cell: number) => -165 + 15 * cell;
const energyAt = (angle: number, y: number) =>
  4 * (y * y - 1) ** 2 -
  2 * y * Math.sin((angle * Math.PI) / 180) +
  3 * Math.cos((angle * Math.PI) / 60);

interface ToyGeometry {
  readonly energy: number;
  readonly y: number;
}

function toy(families: number) {
  const settled: Start[] = [];
  const wave = createWave<ToyGeometry>(
    {
      cellCount: count,
      offers: (cell, { y }) =>
        [1, count - 1].map((turn) => ({
          cell: (cell + turn) % count,
          coordinates: Float64Array.of(y),
        })),
      settle: async (start) => {
        settled.push(start);
        const angle = angleOf(start.cell);
        let y = start.coordinates[0];
        for (let n = 0; n < 500; n++) {
          y -= 0.02 * (16 * y * (y * y - 1) - 2 * Math.sin((angle * Math.PI) / 180));
        }
        return { y, energy: energyAt(angle, y) };
      },
      same: (one, other) => Math.abs(one.y - other.y) < 1e-3,
    },
    { families, window: 10 },
  );
  return { wave, settled };
}

const startAt = (cell: number, y: number): Start => ({ cell, coordinates: Float64Array.of(y) });

/** The lowest energy over y on a fine raster: an answer that needs no waves. */
function lowest(angle: number): number {
  let energy = Infinity;
  for (let y = -2; y <= 2; y += 1e-3) energy = Math.min(energy, energyAt(angle, y));
  return energy;
}

describe('createWave', () => {
  it('finds the lowest envelope from one start in each well, wherever they lie', async () => {
    for (const [first, second] of [
      [0, 1],
      [5, 5],
      [23, 11],
    ]) {
      const { wave } = toy(2);
      expect(await wave.run([startAt(first, 1), startAt(second, -1)], unattended)).toBe(true);
      wave.families.forEach((geometries, cell) => {
        expect(geometries[0].energy).toBeLessThan(lowest(angleOf(cell)) + 1e-4);
      });
    }
  });

  it('carries a family over cells where it is not the best', async () => {
    // The well at -1 is entered only where it is the higher one; it must reach the half where it is the lower.
    const { wave } = toy(2);
    await wave.run([startAt(15, 1), startAt(17, -1)], unattended);
    expect(wave.families[4][0].energy).toBeLessThan(lowest(angleOf(4)) + 1e-4);
    const single = toy(1).wave;
    await single.run([startAt(15, 1), startAt(17, -1)], unattended);
    expect(single.families[4][0].energy).toBeGreaterThan(lowest(angleOf(4)) + 1);
  });

  it('does not follow a geometry it already knows', async () => {
    const { wave, settled } = toy(2);
    await wave.run([startAt(3, 1)], unattended);
    const spent = settled.length;
    expect(spent).toBeLessThanOrEqual(2 * count + 1);
    await wave.run([startAt(9, 1)], unattended);
    expect(settled.length).toBe(spent + 1);
  });

  it('ends with what it has when time is out, and says so', async () => {
    const { wave, settled } = toy(2);
    let left = 5;
    const control: Control = { ...unattended, expired: () => left-- <= 0 };
    expect(await wave.run([startAt(3, 1)], control)).toBe(false);
    expect(settled.length).toBeLessThan(10);
    expect(wave.families.filter((geometries) => geometries.length > 0).length).toBeGreaterThan(0);
  });
});
