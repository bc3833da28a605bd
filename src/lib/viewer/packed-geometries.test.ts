import { describe, expect, it } from 'vitest';
import { packScan } from '$lib/server/scan-section';
import { molblock } from './molblock';
import { unpack } from './packed-geometries';

describe('geometries on their way to the browser', () => {
  const points = [0, 15].map((angle) => ({
    coordinates: Float64Array.from({ length: 6 }, (_, n) => angle + n / 7),
  }));
  const stationary = [{ coordinates: Float64Array.from({ length: 6 }, (_, n) => -n) }];

  it('arrive in order: points first, then stationary points', () => {
    const answer = { profiles: [{ points, stationary }] } as unknown as Parameters<
      typeof packScan
    >[0];
    const frames = unpack(packScan(answer).buffer, 2);
    expect(frames).toHaveLength(3);
    [...points, ...stationary].forEach(({ coordinates }, frame) =>
      coordinates.forEach((value, n) => expect(frames[frame][n]).toBeCloseTo(value, 5)),
    );
  });

  it('are written as a connection table for the 3-D view', () => {
    const lines = molblock({ symbols: ['C', 'Cl'], bonds: [[0, 1, 1]] }, [0, 0, 0, -1.75, 0, 12.5]);
    expect(lines.split('\n').slice(3, 8)).toEqual([
      '  2  1  0  0  0  0  0  0  0  0999 V2000',
      '    0.0000    0.0000    0.0000 C   0  0  0  0  0  0  0  0  0  0  0  0',
      '   -1.7500    0.0000   12.5000 Cl  0  0  0  0  0  0  0  0  0  0  0  0',
      '  1  2  1  0',
      'M  END',
    ]);
  });
});
