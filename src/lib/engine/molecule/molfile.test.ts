import { describe, expect, it } from 'vitest';
import { InputError } from '../errors';
import { angle, distance } from '../geometry';
import { readMolecule, splitRecords } from './read';

/** A V2000 molfile from atom lines "x y z symbol fields", bond lines "a b type stereo" and properties. */
function molfile(
  atoms: readonly string[],
  bonds: readonly string[],
  properties: readonly string[] = [],
  dimensions = '2D',
): string {
  const atomLines = atoms.map((text) => {
    const [x, y, z, symbol, ...fields] = text.split(' ');
    const place = [x, y, z].map((value) => value.padStart(10)).join('');
    return `${place} ${symbol.padEnd(3)} 0${fields.map((field) => field.padStart(3)).join('')}`;
  });
  const bondLines = bonds.map((text) =>
    text
      .split(' ')
      .map((field) => field.padStart(3))
      .join(''),
  );
  const counts = `${String(atoms.length).padStart(3)}${String(bonds.length).padStart(3)}  0  0  0  0            999 V2000`;
  return [
    'name',
    `  program           ${dimensions}`,
    '',
    counts,
    ...atomLines,
    ...bondLines,
    ...properties,
    'M  END',
    '',
  ].join('\n');
}

const read = (text: string) => readMolecule({ molfile: text });

function refusal(text: string): InputError {
  try {
    read(text);
  } catch (error) {
    if (error instanceof InputError) return error;
    throw error;
  }
  throw new Error('the molfile was accepted');
}

const ETHANOL = ['0.0 0.0 0.0 C', '1.5 0.0 0.0 C', '2.2 1.2 0.0 O'];
const CHAIN = ['1 2 1 0', '2 3 1 0'];

describe('molfiles', () => {
  it('reads a drawing: atoms in order, hydrogens after them, no geometry', () => {
    const molecule = read(molfile(ETHANOL, CHAIN));
    expect(molecule.name).toBe('name');
    expect([...molecule.atomicNumbers]).toEqual([6, 6, 8, 1, 1, 1, 1, 1, 1]);
    expect(molecule.givenAtomCount).toBe(3);
    expect(molecule.coordinates).toBeNull();
    expect(molecule.smiles).toBe('CCO');
  });

  it('reads charges and isotopes from atom and property lines', () => {
    const inAtoms = read(molfile(['0.0 0.0 0.0 N 3', '1.5 0.0 0.0 D'], ['1 2 1 0']));
    expect(inAtoms.formalCharges[0]).toBe(1);
    expect(inAtoms.massNumbers[1]).toBe(2);
    expect(inAtoms.atomCount).toBe(5);
    const inLines = read(
      molfile(
        ['0.0 0.0 0.0 O 3', '1.5 0.0 0.0 C'],
        ['1 2 1 0'],
        ['M  CHG  1   1  -1', 'M  ISO  1   2  13'],
      ),
    );
    expect([...inLines.formalCharges.slice(0, 2)]).toEqual([-1, 0]);
    expect(inLines.massNumbers[1]).toBe(13);
  });

  it('places the double bonds of aromatic bond types', () => {
    const ring = [0, 60, 120, 180, 240, 300].map((turn) => {
      const radians = (turn * Math.PI) / 180;
      return `${(1.4 * Math.cos(radians)).toFixed(4)} ${(1.4 * Math.sin(radians)).toFixed(4)} 0.0 C`;
    });
    const bonds = [1, 2, 3, 4, 5, 6].map((atom) => `${atom} ${(atom % 6) + 1} 4 0`);
    expect(read(molfile(ring, bonds)).smiles).toBe('c1ccccc1');
  });

  it('reads wedges: the same drawing with the wedge reversed is the mirror image', () => {
    // L-alanine as commonly drawn: amino group on a wedge, acid right, methyl left (no source).
    const atoms = [
      '0.0 0.0 0.0 C',
      '-1.3 -0.75 0.0 C',
      '0.0 1.5 0.0 N',
      '1.3 -0.75 0.0 C',
      '1.3 -2.25 0.0 O',
      '2.6 0.0 0.0 O',
    ];
    const drawn = (wedge: number) =>
      read(molfile(atoms, ['1 2 1 0', `1 3 1 ${wedge}`, '1 4 1 0', '4 5 2 0', '4 6 1 0']));
    const up = drawn(1);
    const down = drawn(6);
    expect(up.stereocenters.length).toBe(1);
    expect([up.smiles, down.smiles]).toContain(readMolecule({ smiles: 'C[C@H](N)C(=O)O' }).smiles);
    expect([up.smiles, down.smiles]).toContain(readMolecule({ smiles: 'C[C@@H](N)C(=O)O' }).smiles);
    expect(drawn(4).warnings).toMatchObject([{ code: 'undefined-stereocenter', atom: 0 }]);
    // A wedge speaks for the atom at its narrow end: turned round it says nothing here.
    const turned = molfile(atoms, ['1 2 1 0', '3 1 1 1', '1 4 1 0', '4 5 2 0', '4 6 1 0']);
    expect(read(turned).warnings).toMatchObject([{ code: 'undefined-stereocenter', atom: 0 }]);
  });

  it('reads the sides of double bonds, and leaves crossed ones open', () => {
    const atoms = ['-0.7 1.2 0.0 F', '0.0 0.0 0.0 C', '1.3 0.0 0.0 C', '2.0 1.2 0.0 F'];
    const drawn = (stereo: number) =>
      read(molfile(atoms, ['1 2 1 0', `2 3 2 ${stereo}`, '3 4 1 0']));
    expect(drawn(0).smiles).toBe(readMolecule({ smiles: 'F/C=C\\F' }).smiles);
    expect(drawn(3).warnings).toMatchObject([{ code: 'undefined-double-bond', atom: 1 }]);
  });

  it('reads V3000 with any atom numbers and continued lines', () => {
    const text = `name
  program           2D

  0  0  0     0  0            999 V3000
M  V30 BEGIN CTAB
M  V30 COUNTS 3 2 0 0 0
M  V30 BEGIN ATOM
M  V30 7 C 0 0 0 0
M  V30 3 N 1.5 0 0 0 -
M  V30 CHG=1
M  V30 9 H 2 1 0 0 MASS=2
M  V30 END ATOM
M  V30 BEGIN BOND
M  V30 1 1 7 3
M  V30 2 1 3 9
M  V30 END BOND
M  V30 END CTAB
M  END
`;
    const molecule = read(text);
    expect([...molecule.atomicNumbers.slice(0, 3)]).toEqual([6, 7, 1]);
    expect(molecule.formalCharges[1]).toBe(1);
    expect(molecule.massNumbers[2]).toBe(2);
    expect(molecule.atomCount).toBe(8);
    expect(refusal(text.replace('9 H 2', '9 * 2'))).toMatchObject({
      code: 'query-feature',
      line: 11,
    });
    expect(refusal(text.replace('1 7 3', '1 7 4'))).toMatchObject({ code: 'unreadable', line: 14 });
    expect(refusal(text.replace('COUNTS 3', 'COUNTS 4'))).toMatchObject({
      code: 'unreadable',
      line: 6,
    });
    const cut = text.slice(0, text.indexOf('M  V30 END BOND'));
    expect(refusal(cut)).toMatchObject({ code: 'unreadable', line: 16 });
  });

  it('takes the first record of an SDF and splits all of them', () => {
    const first = molfile(ETHANOL, CHAIN);
    const sdf = `${first}> <field>\nvalue\n\n$$$$\n${molfile(['0.0 0.0 0.0 N'], [])}$$$$\n`;
    expect(read(sdf).smiles).toBe('CCO');
    const records = splitRecords(sdf);
    expect(records.map((record) => read(record).smiles)).toEqual(['CCO', 'N']);
    expect(records[0]).toContain('<field>');
    expect(splitRecords(sdf.replaceAll('\n', '\r\n')).length).toBe(2);
    expect(splitRecords('\n')).toEqual([]);
  });
});

describe('geometries', () => {
  const WATER = ['0.0 0.0 0.0 O', '0.9572 0.0 0.0 H', '-0.2400 0.9266 0.0 H'];

  it('keeps a planar molecule that the header calls 3D', () => {
    const molecule = read(molfile(WATER, ['1 2 1 0', '1 3 1 0'], [], '3D'));
    expect(molecule.coordinates && [...molecule.coordinates]).toEqual([
      0, 0, 0, 0.9572, 0, 0, -0.24, 0.9266, 0,
    ]);
    expect(read(molfile(WATER, ['1 2 1 0', '1 3 1 0'])).coordinates).toBeNull();
  });

  it('places missing hydrogens at sensible distances and angles', () => {
    const bent = ['0.0 0.0 0.0 C', '1.5 0.0 0.1 C', '2.1 1.2 0.0 N'];
    const molecule = read(molfile(bent, CHAIN, [], '3D'));
    const x = molecule.coordinates as Float64Array;
    expect(molecule.warnings.map(({ code }) => code)).toEqual(['hydrogens-added']);
    for (let hydrogen = 3; hydrogen < molecule.atomCount; hydrogen++) {
      const center = molecule.neighbors[hydrogen][0].atom;
      expect(distance(x, center, hydrogen)).toBeGreaterThan(1);
      expect(distance(x, center, hydrogen)).toBeLessThan(1.1);
      for (const { atom } of molecule.neighbors[center]) {
        if (atom === hydrogen) continue;
        expect(angle(x, hydrogen, center, atom)).toBeGreaterThan(100);
        expect(angle(x, hydrogen, center, atom)).toBeLessThan(118);
      }
    }
  });

  it('follows the geometry where a wedge contradicts it, and says so', () => {
    const atoms = [
      '0.0 0.0 0.0 C',
      '0.6 0.6 0.6 H',
      '-1.0 -1.0 1.0 F',
      '-1.0 1.0 -1.0 Cl',
      '1.0 -1.0 -1.0 Br',
    ];
    const bonds = (wedge: number) => ['1 2 1 0', `1 3 1 ${wedge}`, '1 4 1 0', '1 5 1 0'];
    const plain = read(molfile(atoms, bonds(0), [], '3D'));
    const codes = [1, 6].map((wedge) => {
      const marked = read(molfile(atoms, bonds(wedge), [], '3D'));
      expect(marked.smiles).toBe(plain.smiles);
      return marked.warnings.map(({ code }) => code);
    });
    expect(codes).toContainEqual([]);
    expect(codes).toContainEqual(['stereo-from-geometry']);
  });

  it('ignores a file without coordinates and says so', () => {
    const molecule = read(molfile(['0.0 0.0 0.0 C', '0.0 0.0 0.0 C'], ['1 2 1 0']));
    expect(molecule.coordinates).toBeNull();
    expect(molecule.warnings.map(({ code }) => code)).toEqual(['geometry-ignored']);
  });
});

describe('what is refused', () => {
  const lines = molfile(ETHANOL, CHAIN).split('\n');
  const withLine = (number: number, text: string) =>
    [...lines.slice(0, number - 1), text, ...lines.slice(number)].join('\n');

  it.each([
    ['no molfile at all', 'CCO', 'unreadable', 1],
    ['a lost header line', lines.slice(1).join('\n'), 'unreadable', 3],
    ['a cut atom block', lines.slice(0, 6).join('\n'), 'unreadable', 6],
    ['a cut bond block', lines.slice(0, 8).join('\n'), 'unreadable', 8],
    ['no M  END', lines.slice(0, 9).join('\n'), 'unreadable', 9],
    [
      'counts that are too small',
      withLine(4, '  3  1  0  0  0  0            999 V2000'),
      'unreadable',
      9,
    ],
    [
      'letters for a number',
      withLine(4, '  3  x  0  0  0  0            999 V2000'),
      'unreadable',
      4,
    ],
    ['no atoms', withLine(4, '  0  0  0  0  0  0            999 V2000'), 'empty-input', 4],
    ['too many atoms', withLine(4, '201  2  0  0  0  0            999 V2000'), 'too-large', 4],
    [
      'a coordinate that is no number',
      withLine(5, '       nan       0.0       0.0 C   0  0'),
      'bad-geometry',
      5,
    ],
    [
      'a coordinate of letters',
      withLine(5, '       abc       0.0       0.0 C   0  0'),
      'unreadable',
      5,
    ],
    [
      'an unknown element',
      withLine(6, '    1.5000    0.0000    0.0000 Xq  0  0'),
      'unknown-element',
      6,
    ],
    ['an R group', withLine(6, '    1.5000    0.0000    0.0000 R#  0  0'), 'query-feature', 6],
    ['any atom', withLine(6, '    1.5000    0.0000    0.0000 A   0  0'), 'query-feature', 6],
    [
      'a radical in the atom line',
      withLine(6, '    1.5000    0.0000    0.0000 C   0  4'),
      'radical',
      6,
    ],
    ['a bond to an atom that is not there', withLine(8, '  1  9  1  0'), 'unreadable', 8],
    ['a bond from an atom to itself', withLine(8, '  1  1  1  0'), 'unreadable', 8],
    ['a bond given twice', withLine(9, '  2  1  1  0'), 'unreadable', 9],
    ['a query bond', withLine(8, '  1  2  8  0'), 'query-feature', 8],
    ['a dative bond', withLine(8, '  1  2  9  0'), 'unsupported-environment', 8],
    ['a radical property', withLine(10, 'M  RAD  1   1   2\nM  END'), 'radical', 5],
    ['an atom list', withLine(10, 'M  ALS   1  2 F C   N\nM  END'), 'query-feature', 10],
    ['an abbreviation', withLine(10, 'A    1\nBoc\nM  END'), 'query-feature', 10],
    ['a charge on no atom', withLine(10, 'M  CHG  1   9   1\nM  END'), 'unreadable', 10],
    [
      'two parts',
      withLine(9, '  1  3  1  0').replace('  3  2', '  3  1').replace('  1  2  1  0\n', ''),
      'mixture',
      6,
    ],
    [
      'overlapping bonded atoms',
      withLine(6, '    0.0000    0.0000    0.0000 C   0  0'),
      'bad-geometry',
      6,
    ],
    [
      'overlapping atoms in space',
      withLine(6, '    2.2000    1.2000    0.0100 C   0  0'),
      'bad-geometry',
      7,
    ],
  ])('%s', (_, text, code, line) => {
    const error = refusal(text);
    expect(error.code).toBe(code);
    expect(error.line).toBe(line);
    expect(error.message.length).toBeGreaterThan(15);
  });

  it('refuses five bonds at carbon with atom and line', () => {
    const atoms = [
      '0.0 0.0 0.0 C',
      '1.0 0.0 0.0 C',
      '0.0 1.0 0.0 C',
      '-1.0 0.0 0.0 C',
      '0.0 -1.0 0.0 C',
      '1.0 1.0 0.0 C',
    ];
    const error = refusal(
      molfile(
        atoms,
        [2, 3, 4, 5, 6].map((other) => `1 ${other} 1 0`),
      ),
    );
    expect(error).toMatchObject({ code: 'valence', atom: 0, line: 5 });
  });
});
