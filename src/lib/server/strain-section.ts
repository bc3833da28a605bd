/** The strain of a given geometry as its molecule's page shows it. */
import { atomLabel, type Molecule, type Result } from '../engine';
import type { Answer } from './answers';
import { bondName } from './molecules';
import { heavyAtoms, provenance, type ToldApart } from './section-parts';

type StrainDetails = Omit<Result<'strain'>, 'molfile' | 'smiles' | 'warnings' | 'provenance'>;

/** The geometries of a strain answer: as given, relaxed in place, and of the lowest conformer. */
export function strainGeometries({ molfile, details }: Answer): string[] {
  const { relaxedMolfile, lowestMolfile } = details as unknown as StrainDetails;
  return [molfile, relaxedMolfile, lowestMolfile];
}

export function describeStrain(molecule: Molecule, answer: ToldApart) {
  const details = answer.details as unknown as StrainDetails;
  const settings = answer.settings as unknown as Pick<
    Extract<Result<'strain'>['provenance']['settings'], { kind: 'strain' }>,
    'tether' | 'dielectric'
  >;
  const { strain, strainTerms, given, relaxed, lowest, complete, largestDisplacement } = details;
  return {
    ...provenance(answer),
    strain,
    strainTerms,
    given,
    relaxed,
    lowest,
    complete,
    tether: settings.tether,
    dielectric: settings.dielectric,
    largestDisplacement,
    farthestAtom: atomLabel(molecule.atomicNumbers[details.farthestAtom], details.farthestAtom),
    heavyAtoms: heavyAtoms(molecule),
    torsions: details.torsions.map(({ bond, torsion, ...values }) => ({
      atoms: bond,
      torsion,
      name: bondName(molecule, bond),
      torsionName: bondName(molecule, torsion),
      ...values,
    })),
  };
}
