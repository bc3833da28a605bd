import { describe, expect, it } from 'vitest';
import { drawMolecule } from './drawing';
import { readMolecule } from './read';

describe('drawMolecule', () => {
  const molecule = readMolecule({ smiles: 'C[C@H](N)C(=O)Oc1ccc(Cl)cc1' });
  const drawing = drawMolecule(molecule);

  it('places every heavy atom and every bond between them, by our numbers', () => {
    const heavy = [...molecule.atomicNumbers.keys()].filter(
      (atom) => molecule.atomicNumbers[atom] > 1,
    );
    expect(drawing.atoms.map(({ atom }) => atom).sort((a, b) => a - b)).toEqual(heavy);
    const between = [...molecule.bonds.keys()].filter((bond) =>
      [molecule.bonds[bond].a, molecule.bonds[bond].b].every(
        (atom) => molecule.atomicNumbers[atom] > 1,
      ),
    );
    expect(drawing.bonds.map(({ bond }) => bond).sort((a, b) => a - b)).toEqual(between);
  });

  it('draws each bond between its own two atoms', () => {
    const place = new Map(drawing.atoms.map(({ atom, x, y }) => [atom, [x, y]]));
    for (const { bond, x1, y1, x2, y2 } of drawing.bonds) {
      const { a, b } = molecule.bonds[bond];
      const ends = [place.get(a), place.get(b)].map(String).sort();
      expect(
        [
          [x1, y1],
          [x2, y2],
        ]
          .map(String)
          .sort(),
      ).toEqual(ends);
    }
  });

  it('leaves colors to the page and keeps nothing that runs', () => {
    expect(drawing.markup).toContain('currentColor');
    expect(drawing.markup).toContain('var(--element-nitrogen');
    expect(drawing.markup).not.toMatch(/rgb\(|<style|<script|class=|\bon\w+=/);
  });

  it.each(['[Na+]', '[2H]C', 'C', 'C#C', 'CC(=O)[O-]', 'O=S(=O)(c1ccccc1)N(C)C'])(
    'draws %s',
    (smiles) => {
      const { viewBox, atoms } = drawMolecule(readMolecule({ smiles }));
      expect(atoms.length).toBeGreaterThan(0);
      expect(viewBox[2]).toBeGreaterThan(0);
      expect(viewBox[3]).toBeGreaterThan(0);
    },
  );
});
