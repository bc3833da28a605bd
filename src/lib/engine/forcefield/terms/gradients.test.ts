/** Every term's gradient against central differences, at ordinary and at awkward geometries. */
import { describe, expect, it } from 'vitest';
import type { EnergyTerm } from '$lib/engine/energy-term';
import { createRandom } from '$lib/engine/random';
import { gradientError, gradientOf } from '../../../../../tests/support/gradient';
import { angleTerm } from './angle';
import { bondTerm } from './bond';
import { electrostaticTerm } from './electrostatic';
import { outOfPlaneTerm } from './out-of-plane';
import { stretchBendTerm } from './stretch-bend';
import { torsionTerm } from './torsion';
import { vanDerWaalsTerm } from './van-der-waals';

/** Relative; the differences themselves are good to about 1e-8. */
const TOLERANCE = 1e-5;

const one = (value: number): Float64Array => Float64Array.of(value);
const pair = Int32Array.of(0, 1);
const three = Int32Array.of(0, 1, 2);
const four = Int32Array.of(0, 1, 2, 3);

/** MMFF94-like parameters of single interactions. */
const terms: Record<string, EnergyTerm> = {
  bond: bondTerm({ atoms: pair, length: one(1.508), force: one(4.258) }),
  angle: angleTerm({
    atoms: three,
    angle: one(109.6),
    force: one(0.851),
    linear: Uint8Array.of(0),
  }),
  'angle at a linear vertex': angleTerm({
    atoms: three,
    angle: one(180),
    force: one(0.4),
    linear: Uint8Array.of(1),
  }),
  'stretch-bend': stretchBendTerm({
    atoms: three,
    lengthIJ: one(1.508),
    lengthKJ: one(1.093),
    angle: one(110.5),
    forceIJK: one(0.227),
    forceKJI: one(0.07),
  }),
  'out-of-plane': outOfPlaneTerm({ atoms: four, force: one(0.12) }),
  torsion: torsionTerm({ atoms: four, v1: one(0.103), v2: one(-0.681), v3: one(0.332) }),
  'van der Waals': vanDerWaalsTerm({ atoms: pair, radius: one(3.9), depth: one(0.07) }),
  electrostatic: electrostaticTerm(
    { atoms: pair, chargeProduct: one(-0.2) },
    { constant: 1, distanceDependent: false },
  ),
  'electrostatic, distance-dependent': electrostaticTerm(
    { atoms: pair, chargeProduct: one(-0.2) },
    { constant: 4, distanceDependent: true },
  ),
};

/** Four points in a chain 0-1-2-3 with bonds of 1.5 Å, angles and torsion in degrees. */
function chain(first: number, second: number, torsion: number): Float64Array {
  const [a, b, t] = [first, second, torsion].map((degrees) => (degrees * Math.PI) / 180);
  const r = 1.5;
  return Float64Array.of(
    ...[r * Math.cos(a), r * Math.sin(a), 0],
    ...[0, 0, 0],
    ...[r, 0, 0],
    r - r * Math.cos(b),
    r * Math.sin(b) * Math.cos(t),
    r * Math.sin(b) * Math.sin(t),
  );
}

/** Three points about point 1, which lies `height` Å above their plane. */
function trigonal(height: number): Float64Array {
  const x = Float64Array.of(1.4, 0, 0, 0, 0, height, -0.7, 1.2, 0, -0.7, -1.2, 0);
  return x;
}

const random = createRandom(11);
const geometries: Record<string, Float64Array> = {
  'a bent chain': chain(112, 115, 55),
  'a planar cis chain': chain(120, 120, 0),
  'a planar trans chain': chain(120, 120, 180),
  'a right angle': chain(90, 90, 90),
  'an angle of 179.9 degrees': chain(179.9, 115, 40),
  'two angles of 179.9 degrees': chain(179.9, 179.9, 40),
  'an angle of 1 degree': chain(1, 115, 40),
  'a planar center': trigonal(0),
  'a nearly planar center': trigonal(1e-4),
  'a pyramidal center': trigonal(0.5),
  'a steep pyramid': trigonal(4),
  ...Object.fromEntries(
    Array.from({ length: 8 }, (_, n) => [
      `random points ${n}`,
      Float64Array.from({ length: 12 }, () => 4 * random.uniform()),
    ]),
  ),
};

describe.each(Object.entries(terms))('the gradient of the %s term', (_name, term) => {
  it.each(Object.entries(geometries))('agrees with central differences at %s', (_place, x) => {
    // Near a line derivatives change within 0.1 degrees, so the differences must be finer there.
    expect(gradientError(term, x, 1e-6)).toBeLessThan(TOLERANCE);
  });

  it('sums to no force and no torque', () => {
    const x = geometries['random points 0'];
    const g = gradientOf(term, x);
    const sums = [0, 1, 2].map((p) => {
      const [q, r] = [(p + 1) % 3, (p + 2) % 3];
      let force = 0;
      let torque = 0;
      for (let a = 0; a < x.length; a += 3) {
        force += g[a + p];
        torque += x[a + q] * g[a + r] - x[a + r] * g[a + q];
      }
      return Math.max(Math.abs(force), Math.abs(torque));
    });
    expect(Math.max(...sums)).toBeLessThan(1e-9 * Math.max(1, ...g.map(Math.abs)));
  });

  it('is finite for atoms on a line and on top of each other', () => {
    const awkward = [chain(180, 180, 0), chain(0, 0, 0), new Float64Array(12), chain(180, 90, 30)];
    for (const x of awkward) {
      const gradient = new Float64Array(12);
      const energy = term(x, gradient);
      expect([energy, ...gradient].every(Number.isFinite)).toBe(true);
    }
  });
});
