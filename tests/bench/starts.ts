/** Starting geometries: openchemlib's own conformers, as the molfiles every program is given. */
import { ConformerGenerator, Molecule as OpenchemlibMolecule } from 'openchemlib';

/** Up to `count` conformers of openchemlib's generator as V2000 molfiles, hydrogens last. */
export function openchemlibStarts(smiles: string, count: number): string[] {
  const molecule = OpenchemlibMolecule.fromSmiles(smiles);
  molecule.addImplicitHydrogens();
  const generator = new ConformerGenerator(1);
  generator.initializeConformers(molecule, {});
  const starts: string[] = [];
  while (starts.length < count) {
    const conformer = generator.getNextConformerAsMolecule();
    if (!conformer) break;
    starts.push(conformer.toMolfile());
  }
  return starts;
}
