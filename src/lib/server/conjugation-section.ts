/** The conjugated bonds of a molecule as its page shows them. */
import type { Molecule, Result } from '../engine';
import type { Answer } from './answers';
import { bondName } from './molecules';
import { heavyAtoms, provenance, type ToldApart } from './section-parts';

type Bond = Result<'conjugation'>['bonds'][number];

/** The bonds of a conjugation answer as the engine gave them. */
export function conjugatedBonds({ details }: Answer): readonly Bond[] {
  return (details as Pick<Result<'conjugation'>, 'bonds'>).bonds;
}

/** The forms of all bonds in the order of their geometries: s-cis before s-trans, bond by bond. */
export function conjugationForms(answer: Answer) {
  return conjugatedBonds(answer).flatMap(({ sCis, sTrans }) =>
    [sCis, sTrans].flatMap((form) => form ?? []),
  );
}

export function describeConjugation(molecule: Molecule, answer: ToldApart) {
  const forms = conjugationForms(answer);
  const describeForm = (form: Bond['sCis']) => {
    if (!form) return null;
    const { molfile: _molfile, ...described } = form;
    return { ...described, geometry: forms.indexOf(form) };
  };
  return {
    ...provenance(answer),
    temperature: answer.settings.temperature as number,
    heavyAtoms: heavyAtoms(molecule),
    bonds: conjugatedBonds(answer).map((bond) => ({
      atoms: bond.bond,
      name: bondName(molecule, bond.bond),
      kind: bond.kind,
      inRing: bond.inRing,
      torsion: bond.torsion,
      twist: bond.twist,
      difference: bond.difference,
      sCisFraction: bond.sCisFraction,
      planarSCisCost: bond.planarSCisCost,
      barrier: bond.barrier,
      meanOverlap: bond.meanOverlap,
      profile: bond.profile,
      sCis: describeForm(bond.sCis),
      sTrans: describeForm(bond.sTrans),
    })),
  };
}
