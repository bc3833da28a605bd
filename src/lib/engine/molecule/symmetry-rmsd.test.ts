import { describe, expect, it } from 'vitest';
import { rotateAbout } from '../geometry';
import { readMolecule } from './read';
import { movedAtoms } from './rotatable';
import { automorphisms } from './symmetry';
import { symmetryRmsd } from './symmetry-rmsd';

/** Toluene's heavy atoms in the plane, as a 3-D file without hydrogens. */
const RING = [0, 60, 120, 180, 240, 300].map((turn) => (turn * Math.PI) / 180);
const ATOMS = [
  [2.9, 0, 0.002],
  ...RING.map((turn) => [1.4 * Math.cos(turn), 1.4 * Math.sin(turn), 0]),
];
const TOLUENE = [
  'toluene',
  '  program           3D',
  '',
  '  7  7  0  0  0  0            999 V2000',
  ...ATOMS.map(
    (place) => `${place.map((value) => value.toFixed(4).padStart(10)).join('')} C   0  0`,
  ),
  '  1  2  1  0',
  ...[1, 2, 3, 4, 5, 6].map(
    (n) =>
      `${String(n + 1).padStart(3)}${String((n % 6) + 2).padStart(3)}${String(1 + (n % 2)).padStart(3)}  0`,
  ),
  'M  END',
].join('\n');

describe('symmetryRmsd', () => {
  const molecule = readMolecule({ molfile: TOLUENE });
  const x = molecule.coordinates as Float64Array;
  const flipped = Float64Array.from(x);
  rotateAbout(flipped, movedAtoms(molecule, 0, 1), 0, 1, 180);
  const { automorphisms: found } = automorphisms(molecule, { atoms: 'heavy', limit: 100 });
  const permutations = found.map(({ permutation }) => permutation);

  it('sees a flipped phenyl ring as the same shape', () => {
    expect(permutations.length).toBe(2);
    expect(symmetryRmsd(molecule, x, flipped, permutations)).toBeLessThan(1e-3);
  });

  it('sees the distance when names count', () => {
    const bent = Float64Array.from(x);
    rotateAbout(bent, [2], 1, 3, 40);
    expect(symmetryRmsd(molecule, x, bent, permutations)).toBeGreaterThan(0.1);
    const identity = permutations.slice(0, 1);
    const stretched = x.map((value, n) => (n === 3 * 2 + 2 ? value + 1 : value));
    expect(symmetryRmsd(molecule, x, stretched, identity)).toBeGreaterThan(0.2);
  });
});
