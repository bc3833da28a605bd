import { describe, expect, it } from 'vitest';
import { rotateAbout } from '../geometry';
import { readMolecule } from '../molecule/read';
import { symmetryClasses } from '../molecule/symmetry-classes';
import { findDrives, setTorsion } from './drives';
import { initialGeometry } from './initial-geometry';
import { forEachMatching } from './matchings';
import { isSameShape, lowestRmsd, mirrorImage } from './sameness';
import { visibleGraph } from './visible-graph';

async function build(smiles: string) {
  const molecule = readMolecule({ smiles });
  const classes = symmetryClasses(molecule);
  const graph = visibleGraph(molecule, classes);
  return { molecule, classes, graph, x: await initialGeometry(molecule, 1) };
}

describe('isSameShape', () => {
  it('sees through rotation, mirror and renumbering', async () => {
    const { molecule, graph, x } = await build('CCCCO');
    const all = Array.from({ length: molecule.atomCount }, (_, atom) => atom);
    const turned = x.slice();
    rotateAbout(turned, all, 0, 4, 100);
    rotateAbout(turned, all, 1, 3, 50);
    expect(isSameShape(graph, turned, x, 1e-4)).toBe(true);
    expect(isSameShape(graph, mirrorImage(x), x, 1e-4)).toBe(true);

    const butane = await build('CCCC');
    const reversed = butane.x.slice();
    for (const [to, from] of [3, 2, 1, 0].entries()) {
      reversed.set(butane.x.subarray(3 * from, 3 * from + 3), 3 * to);
    }
    expect(isSameShape(butane.graph, reversed, butane.x, 1e-4)).toBe(true);
  });

  it('tells conformers apart, also by one hydroxyl hydrogen', async () => {
    for (const smiles of ['CCCC', 'CCO']) {
      const { molecule, classes, graph, x } = await build(smiles);
      const [drive] = findDrives(molecule, classes);
      const [anti, gauche] = [x.slice(), x.slice()];
      setTorsion(anti, drive, 180);
      setTorsion(gauche, drive, 60);
      expect(isSameShape(graph, anti, gauche), smiles).toBe(false);
      expect(lowestRmsd(graph, anti, gauche), smiles).toBeGreaterThan(0.3);
    }
  });

  it('does not see turns of methyl groups', async () => {
    const { molecule, graph, x } = await build('CCCC');
    const turned = x.slice();
    const hydrogens = molecule.neighbors[0].map(({ atom }) => atom).filter((atom) => atom > 3);
    rotateAbout(turned, hydrogens, 1, 0, 40);
    expect(isSameShape(graph, turned, x, 1e-4)).toBe(true);
  });
});

describe('forEachMatching', () => {
  it('counts the symmetry of graphs', async () => {
    const count = async (smiles: string): Promise<number> => {
      const { graph } = await build(smiles);
      let matchings = 0;
      forEachMatching(graph, null, () => ++matchings > 0);
      return matchings;
    };
    // Orders of the automorphism groups of these skeletons (textbook).
    expect(await count('CCCC')).toBe(2);
    expect(await count('CC(C)(C)C')).toBe(24);
    expect(await count('c1ccccc1')).toBe(12);
    expect(await count('C12C3C4C1C5C2C3C45')).toBe(48);
    expect(await count('CCO')).toBe(1);
  });
});
