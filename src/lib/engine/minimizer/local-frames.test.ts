/** Vectors told in frames that turn with the bonds. */
import { describe, expect, it } from 'vitest';
import { initialGeometry } from '../conformers/initial-geometry';
import { rotateAbout } from '../geometry';
import { findSkeleton } from '../molecule/skeleton';
import { readMolecule } from '../molecule/read';
import { movedAtoms } from '../molecule/rotatable';
import { dot } from './history';
import { createFrames } from './local-frames';

const molecule = readMolecule({ smiles: 'CCCO' });
const skeleton = findSkeleton(molecule);
const size = 3 * molecule.atomCount;
const step = Float64Array.from({ length: size }, (_, a) => Math.sin(5 * a));
const gradient = Float64Array.from({ length: size }, (_, a) => Math.cos(3 * a));

function expectSame(found: Float64Array, expected: Float64Array): void {
  for (let a = 0; a < expected.length; a++) expect(found[a]).toBeCloseTo(expected[a], 9);
}

async function placedFrames(x?: Float64Array) {
  const frames = createFrames(skeleton);
  frames.place(x ?? (await initialGeometry(molecule, 1)));
  return frames;
}

describe('local frames', () => {
  it('give back what was told in them, and keep the product of step and gradient', async () => {
    const frames = await placedFrames();
    const localStep = new Float64Array(size);
    const localGradient = new Float64Array(size);
    const back = new Float64Array(size);
    frames.stepToLocal(step, localStep);
    frames.gradientToLocal(gradient, localGradient);
    expect(dot(localStep, localGradient)).toBeCloseTo(dot(step, gradient), 9);
    frames.stepFromLocal(localStep, back);
    expectSame(back, step);
    frames.gradientFromLocal(localGradient, back);
    expectSame(back, gradient);
  });

  it('carry a turn of a group over to where the group has been turned', async () => {
    const x = await initialGeometry(molecule, 1);
    const turning = movedAtoms(molecule, 1, 2);
    /** The direction in which the group turns about the bond. */
    const turnAt = (place: Float64Array): Float64Array => {
      const [ahead, behind] = [place.slice(), place.slice()];
      rotateAbout(ahead, turning, 1, 2, 1e-3);
      rotateAbout(behind, turning, 1, 2, -1e-3);
      return ahead.map((value, a) => (value - behind[a]) / 2e-3);
    };
    const turned = x.slice();
    rotateAbout(turned, turning, 1, 2, 70);
    const local = new Float64Array(size);
    const carried = new Float64Array(size);
    (await placedFrames(x)).stepToLocal(turnAt(x), local);
    (await placedFrames(turned)).stepFromLocal(local, carried);
    const expected = turnAt(turned);
    for (let a = 0; a < size; a++) expect(carried[a]).toBeCloseTo(expected[a], 6);
    expect(Math.hypot(...expected.map((value, a) => value - turnAt(x)[a]))).toBeGreaterThan(0.01);
  });
});
