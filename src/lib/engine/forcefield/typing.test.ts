import { describe, expect, it } from 'vitest';
import { InputError } from '../errors';
import { createMolecule } from '../molecule/build';
import type { Molecule } from '../molecule/molecule';
import { readMolecule } from '../molecule/read';
import { assembleInteractions } from './assemble';

const molecule = (smiles: string): Molecule => readMolecule({ smiles });
const typesOf = (subject: Molecule): number[] => [
  ...assembleInteractions(subject, 'MMFF94').atomTypes,
];
/** Types of the atoms that the SMILES names. */
const heavyTypes = (smiles: string): number[] => {
  const subject = molecule(smiles);
  return typesOf(subject).slice(0, subject.givenAtomCount);
};

/** The same molecule with its atoms in another order: atom n becomes atom `order[n]`. */
function renumbered(subject: Molecule, order: readonly number[]): Molecule {
  const place = <Value>(values: ArrayLike<Value>): Value[] => {
    const moved: Value[] = new Array<Value>(values.length);
    order.forEach((to, from) => (moved[to] = values[from]));
    return moved;
  };
  return createMolecule({
    atomicNumbers: place(subject.atomicNumbers),
    formalCharges: place(subject.formalCharges),
    bonds: subject.bonds.map(({ a, b, order: bondOrder }) => ({
      a: order[a],
      b: order[b],
      order: bondOrder,
    })),
  });
}

// Halgren, J. Comput. Chem. 1996, 17, 490, table III; the validation suites check the rest.
describe('atom types', () => {
  it.each([
    ['alkane, ring of three, ring of four', 'CC1CC1C1CCC1', [1, 22, 22, 22, 20, 20, 20, 20]],
    ['alkene, allene, alkyne', 'C=CC#CC=C=C', [2, 2, 4, 4, 2, 4, 2]],
    ['olefin in a ring of four', 'C1=CCC1', [30, 30, 20, 20]],
    ['amide and thioamide', 'CC(=O)NC(=S)C', [1, 3, 7, 10, 3, 16, 1]],
    ['ester', 'CC(=O)OC', [1, 3, 7, 6, 1]],
    ['carboxylate', 'CC(=O)[O-]', [1, 41, 32, 32]],
    ['nitro group', 'C[N+](=O)[O-]', [1, 45, 32, 32]],
    ['sulfonamide', 'CS(=O)(=O)NC', [1, 18, 32, 32, 43, 1]],
    ['sulfoxide', 'CS(C)=O', [1, 17, 1, 7]],
    ['phosphate', 'COP(=O)(O)O', [1, 6, 25, 32, 6, 6]],
    ['azide', 'CN=[N+]=[N-]', [1, 9, 53, 47]],
    ['guanidinium', 'NC(=[NH2+])N', [56, 57, 56, 56]],
    ['amidinium', 'CC(=[NH2+])N', [1, 57, 55, 55]],
    ['furan', 'c1ccoc1', [64, 64, 63, 59, 63]],
    ['pyridine', 'c1ccncc1', [37, 37, 37, 38, 37, 37]],
    ['pyridinium', 'c1cc[nH+]cc1', [37, 37, 37, 58, 37, 37]],
    ['imidazole', 'c1c[nH]cn1', [64, 63, 39, 63, 66]],
    ['imidazolium', 'c1c[nH]c[nH+]1', [78, 78, 81, 80, 81]],
    ['tetrazolate', 'c1nn[n-]n1', [78, 76, 76, 76, 76]],
    ['indole', 'c1ccc2[nH]ccc2c1', [37, 37, 37, 63, 39, 63, 64, 64, 37]],
    ['silane and halides', 'C[Si](C)(C)CBr', [1, 19, 1, 1, 1, 13]],
  ])('%s', (_name, smiles, expected) => {
    expect(heavyTypes(smiles)).toEqual(expected);
  });

  it('types hydrogens by what bears them', () => {
    const hydrogensOf = (smiles: string): number[] => {
      const subject = molecule(smiles);
      const types = typesOf(subject).filter((_, atom) => subject.atomicNumbers[atom] === 1);
      return [...new Set(types)].sort((a, b) => a - b);
    };
    expect(hydrogensOf('O')).toEqual([31]);
    expect(hydrogensOf('CO')).toEqual([5, 21]);
    expect(hydrogensOf('CC(=O)O')).toEqual([5, 24]);
    expect(hydrogensOf('Oc1ccccc1')).toEqual([5, 29]);
    expect(hydrogensOf('CN')).toEqual([5, 23]);
    expect(hydrogensOf('CC(=O)N')).toEqual([5, 28]);
    expect(hydrogensOf('C[NH3+]')).toEqual([5, 36]);
    expect(hydrogensOf('CS')).toEqual([5, 71]);
  });
});

// Common practice, no source: one substance, one set of types, however it was drawn.
describe('independence of the drawing', () => {
  it.each([
    ['sulfoxide', 'CS(C)=O', 'C[S+](C)[O-]'],
    ['sulfone', 'CS(C)(=O)=O', 'C[S+2](C)([O-])[O-]'],
    ['phosphine oxide', 'CP(C)(C)=O', 'C[P+](C)(C)[O-]'],
    ['azide', 'CN=[N+]=[N-]', 'C[N-][N+]#N'],
    ['diazo group', 'CC=[N+]=[N-]', 'C[CH-][N+]#N'],
    ['enolate', 'CC([O-])=C', 'CC(=O)[CH2-]'],
    ['pyrazolium', 'C[n+]1n(C)ccc1', 'Cn1[n+](C)ccc1'],
    ['1-methylimidazolium', 'Cn1cc[nH+]c1', 'C[n+]1cc[nH]c1'],
    ['naphthalene', 'C1=CC=C2C=CC=CC2=C1', 'C1C=CC2=CC=CC=C2C=1'],
  ])('%s', (_name, one, other) => {
    const first = assembleInteractions(molecule(one), 'MMFF94');
    const second = assembleInteractions(molecule(other), 'MMFF94');
    expect([...second.atomTypes]).toEqual([...first.atomTypes]);
    first.charges.forEach((charge, atom) => expect(second.charges[atom]).toBeCloseTo(charge, 12));
  });

  it.each(['c1cnc2nccn2c1', 'CS(=O)(=O)Nc1nccs1', 'Cn1c(N)cc[n+]1C', 'C12C3C4C1C5C2C3C45'])(
    'the order of atoms does not matter: %s',
    (smiles) => {
      const subject = molecule(smiles);
      const last = subject.atomCount - 1;
      const order = Array.from({ length: subject.atomCount }, (_, atom) => last - atom);
      const plain = assembleInteractions(subject, 'MMFF94s');
      const moved = assembleInteractions(renumbered(subject, order), 'MMFF94s');
      order.forEach((to, from) => {
        expect(moved.atomTypes[to]).toBe(plain.atomTypes[from]);
        expect(moved.charges[to]).toBeCloseTo(plain.charges[from], 12);
      });
      const sorted = (values: Float64Array): number[] => [...values].sort((a, b) => a - b);
      expect(sorted(moved.interactions.angles.force)).toEqual(
        sorted(plain.interactions.angles.force),
      );
      expect(sorted(moved.interactions.torsions.v2)).toEqual(
        sorted(plain.interactions.torsions.v2),
      );
    },
  );
});

describe('charges', () => {
  it.each([
    ['CC(=O)[O-]', -1],
    ['NC(=[NH2+])NC(N)=[NH2+]', 2],
    ['Cn1ccc[n+]1C', 1],
    ['c1ccc2[n-]nnc2c1', -1],
    ['[O-]P(=O)([O-])OC', -2],
    ['C[NH2+]CC([O-])=O', 0],
    ['CC(=O)[S-]', -1],
  ])('of %s add up to %d', (smiles, total) => {
    const { charges } = assembleInteractions(molecule(smiles), 'MMFF94');
    expect(charges.reduce((sum, charge) => sum + charge, 0)).toBeCloseTo(total, 12);
  });

  it('follow the published increments', () => {
    // Water: 2 × 0.43 and −0.86; acetate oxygens: −0.90 (J. Comput. Chem. 1996, 17, 520, tables II and III).
    expect([...assembleInteractions(molecule('O'), 'MMFF94').charges]).toEqual([-0.86, 0.43, 0.43]);
    const acetate = assembleInteractions(molecule('CC(=O)[O-]'), 'MMFF94').charges;
    expect(acetate[2]).toBeCloseTo(-0.9, 12);
    expect(acetate[3]).toBeCloseTo(-0.9, 12);
  });
});

describe('what MMFF94 does not cover', () => {
  it.each([
    ['selenide', 'C[Se]C', 1, 'Se'],
    ['boronic acid', 'CB(O)O', 1, 'B'],
    ['phosphonium', 'C[P+](C)(C)C', 1, 'P'],
    ['sulfonium', 'C[S+](C)C', 1, 'S'],
    ['hypervalent fluoride', 'FS(F)(F)F', 1, 'S'],
    ['nitrilium', 'CC#[N+]C', 2, 'N'],
    ['phosphazene', 'CP(C)(C)=NC', 4, 'N'],
    ['cyanide', '[C-]#N', 0, 'C'],
  ])('%s is refused with the atom named', (_name, smiles, atom, symbol) => {
    const attempt = (): unknown => assembleInteractions(molecule(smiles), 'MMFF94s');
    expect(attempt).toThrowError(InputError);
    expect(attempt).toThrowError(
      expect.objectContaining({ code: 'unsupported-environment', atom }) as Error,
    );
    expect(attempt).toThrowError(`atom ${atom + 1} (${symbol})`);
  });
});
