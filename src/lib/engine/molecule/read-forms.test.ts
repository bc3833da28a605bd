/**
 * One molecule in many forms: SMILES, drawings and geometries that RDKit 2022.09.3 wrote with shuffled atoms must all
 * be read as the same molecule. RDKit's own numbers are beside them.
 */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { molarMass, molecularFormula } from './identity';
import type { Molecule } from './molecule';
import { readMolecule } from './read';
import recordedForms from './recorded/rdkit-forms.json';
import { stereoOf } from './stereo';
import { toOpenchemlib } from './openchemlib';
import { writeMolfile } from './write';

/** See record-rdkit-forms.py beside the file. */
const { molecules } = recordedForms;

/** Elements, charges and bonds as the molfile lists them. */
function symbolsOf(molfile: string): string[] {
  const lines = molfile.split('\n');
  const count = Number(lines[3].slice(0, 3));
  return lines.slice(4, 4 + count).map((line) => line.slice(31, 34).trim());
}

const numbersOf = (molecule: Molecule) => [...molecule.atomicNumbers];

describe.each(molecules)('$name', (recorded) => {
  const reference = readMolecule({ smiles: recorded.smiles[0] });

  it('has the composition and the stereocenters RDKit counts', () => {
    expect(reference.atomCount).toBe(recorded.atoms);
    expect(molecularFormula(reference).replace('−', '-')).toBe(recorded.formula);
    // RDKit 2022.09.3 has older atomic weights; they differ in the fourth digit.
    expect(molarMass(reference)).toBeCloseTo(recorded.weight, 1);
    expect(reference.stereocenters.length).toBe(recorded.centers);
    expect(reference.stereobonds.length).toBe(recorded.doubleBonds);
    expect(reference.warnings).toEqual([]);
  });

  it('is the same molecule in every SMILES and drawing', () => {
    const forms = [
      ...recorded.smiles.map((smiles) => readMolecule({ smiles })),
      ...recorded.drawings.map((molfile) => readMolecule({ molfile })),
    ];
    for (const form of forms) {
      expect(form.smiles).toBe(reference.smiles);
      expect(form.atomCount).toBe(recorded.atoms);
      expect(form.coordinates).toBeNull();
      expect(form.warnings).toEqual([]);
    }
    expect(readMolecule({ smiles: reference.smiles }).smiles).toBe(reference.smiles);
  });

  it('keeps the geometry and takes its configuration from it', () => {
    const molecule = readMolecule({ molfile: recorded.geometry });
    expect(molecule.smiles).toBe(reference.smiles);
    expect(molecule.givenAtomCount).toBe(recorded.atoms);
    expect(molecule.warnings).toEqual([]);
    const written = writeMolfile(molecule, molecule.coordinates as Float64Array);
    expect(symbolsOf(written)).toEqual(symbolsOf(recorded.geometry));
    const again = readMolecule({ molfile: written });
    expect(again.coordinates).toEqual(molecule.coordinates);
    expect(again.smiles).toBe(reference.smiles);
    expect([...again.formalCharges]).toEqual([...molecule.formalCharges]);
    expect(numbersOf(again)).toEqual(numbersOf(molecule));
  });

  it('gets its missing hydrogens, and sees its mirror image as wrong', () => {
    const molecule = readMolecule({ molfile: recorded.heavyGeometry });
    expect(molecule.smiles).toBe(reference.smiles);
    expect(molecule.atomCount).toBe(recorded.atoms);
    expect(molecule.warnings.map(({ code }) => code)).toEqual(['hydrogens-added']);
    const coordinates = molecule.coordinates as Float64Array;
    expect(stereoOf(molecule, coordinates)).toEqual([]);
    const mirrored = coordinates.map((value, n) => (n % 3 === 0 ? -value : value));
    const centers = stereoOf(molecule, mirrored).filter(({ kind }) => kind === 'stereocenter');
    expect(centers.length).toBe(recorded.centers);
    expect(stereoOf(molecule, mirrored).length).toBe(recorded.centers);
  });

  it('crosses to openchemlib and back with every atom in its place', () => {
    const molecule = readMolecule({ molfile: recorded.geometry });
    const coordinates = molecule.coordinates as Float64Array;
    const { ocl, toOcl, fromOcl } = toOpenchemlib(molecule, coordinates);
    expect(ocl.getAllAtoms()).toBe(molecule.atomCount);
    for (let atom = 0; atom < molecule.atomCount; atom++) {
      expect(ocl.getAtomicNo(toOcl[atom])).toBe(molecule.atomicNumbers[atom]);
      expect(ocl.getAtomX(toOcl[atom])).toBe(coordinates[3 * atom]);
      expect(fromOcl[toOcl[atom]]).toBe(atom);
    }
  });
});

describe('renumbering', () => {
  it('changes neither the canonical SMILES nor the order that was given', () => {
    const geometries = molecules.map(({ geometry }) => geometry);
    fc.assert(
      fc.property(fc.constantFrom(...geometries), fc.infiniteStream(fc.nat()), (molfile, keys) => {
        const molecule = readMolecule({ molfile });
        const order = Array.from({ length: molecule.atomCount }, (_, atom) => atom);
        const sortKeys = order.map(() => keys.next().value as number);
        order.sort((a, b) => sortKeys[a] - sortKeys[b]);
        const shuffled = readMolecule({ molfile: renumbered(molfile, order) });
        expect(shuffled.smiles).toBe(molecule.smiles);
        expect(numbersOf(shuffled)).toEqual(order.map((atom) => molecule.atomicNumbers[atom]));
        const x = molecule.coordinates as Float64Array;
        order.forEach((atom, n) => expect(shuffled.coordinates?.[3 * n]).toBe(x[3 * atom]));
        const moved = shuffled.stereocenters.map(({ atom }) => order[atom]).sort((a, b) => a - b);
        const kept = molecule.stereocenters.map(({ atom }) => atom).sort((a, b) => a - b);
        expect(moved).toEqual(kept);
      }),
      { numRuns: 60 },
    );
  });
});

/** The molfile with its atoms in another order. */
function renumbered(molfile: string, order: readonly number[]): string {
  const lines = molfile.split('\n');
  const atomCount = Number(lines[3].slice(0, 3));
  const bondCount = Number(lines[3].slice(3, 6));
  const place = (text: string) => String(order.indexOf(Number(text) - 1) + 1).padStart(3);
  const atoms = order.map((atom) => lines[4 + atom]);
  const bonds = lines
    .slice(4 + atomCount, 4 + atomCount + bondCount)
    .map((line) => place(line.slice(0, 3)) + place(line.slice(3, 6)) + line.slice(6));
  const properties = lines
    .slice(4 + atomCount + bondCount)
    .map((line) =>
      /^M {2}(CHG|ISO)/.test(line)
        ? line.slice(0, 9) +
          line
            .slice(9)
            .replace(
              / ([ \d]{3}) ([ \d-]{3})/g,
              (_, atom: string, value: string) => ` ${place(atom)} ${value}`,
            )
        : line,
    );
  return [...lines.slice(0, 4), ...atoms, ...bonds, ...properties].join('\n');
}
