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
    starts.push(inFixedOrder(conformer).toMolfile());
  }
  return starts;
}

/**
 * Puts the hydrogens of each atom in the order of their places. The generator numbers those of one carbon now one way and
 * now the other, from run to run; the geometry is the same, but a minimizer that meets its atoms in another order may leave a
 * clash another way, and then two runs of the same code would be compared by different minimizations.
 */
function inFixedOrder(conformer: OpenchemlibMolecule): OpenchemlibMolecule {
  conformer.ensureHelperArrays(OpenchemlibMolecule.cHelperNeighbours);
  for (let atom = 0; atom < conformer.getAllAtoms(); atom++) {
    const hydrogens = Array.from({ length: conformer.getAllConnAtoms(atom) }, (_, n) =>
      conformer.getConnAtom(atom, n),
    )
      .filter((near) => conformer.getAtomicNo(near) === 1)
      .sort((a, b) => a - b);
    const places = hydrogens
      .map((near) => [conformer.getAtomX(near), conformer.getAtomY(near), conformer.getAtomZ(near)])
      .sort((a, b) => a[0] - b[0] || a[1] - b[1] || a[2] - b[2]);
    hydrogens.forEach((near, n) => {
      conformer.setAtomX(near, places[n][0]);
      conformer.setAtomY(near, places[n][1]);
      conformer.setAtomZ(near, places[n][2]);
    });
  }
  return conformer;
}
