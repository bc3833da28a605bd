/** The paragraph about methods that goes with results, and what it cites. */

export interface MethodFacts {
  readonly engineVersion: string;
  readonly models: readonly string[];
  readonly kinds: readonly string[];
}

const REFERENCES = {
  mmff94:
    'T. A. Halgren, J. Comput. Chem. 1996, 17, 490-519; 520-552; 553-586; 587-615; 616-641 (MMFF94).',
  mmff94s: 'T. A. Halgren, J. Comput. Chem. 1999, 20, 720-729 (MMFF94s).',
  labels:
    'G. P. Moss, Pure Appl. Chem. 1996, 68, 2193-2222 (torsion terms after Klyne and Prelog).',
  eyring: 'H. Eyring, J. Chem. Phys. 1935, 3, 107-115 (rates).',
  grimme: 'S. Grimme, Chem. Eur. J. 2012, 18, 9955-9964 (entropies of soft modes).',
  atropisomers:
    'S. R. LaPlante et al., J. Med. Chem. 2011, 54, 7005-7022 (stability classes of axes).',
} as const;

const SENTENCES: Readonly<Record<string, string>> = {
  conformers:
    'Conformers were searched from distance geometry, systematic turns of all rotatable bonds and repeated kicks, minimized to an RMS gradient of at most 0.001 kcal/mol/Å, freed of duplicates under symmetry, and weighted by their Boltzmann factors and degeneracies, by energy and, from version 0.3 on and within 4 kcal/mol of the lowest, by free energy from harmonic frequencies without scaling and without symmetry numbers, which the degeneracies take in.',
  scan: 'Torsion profiles were relaxed at every grid angle with the torsion held, each angle started again from its neighbors’ best geometries until no energy fell further; minima were then minimized freely and maxima refined along the profile. From version 0.3 on, tops of profiles were refined to saddles with one imaginary frequency that lead down to the minima on both sides; free energies take harmonic frequencies, without scaling, with the entropies of soft modes interpolated to those of free rotors. Rates take the free energy of activation, or the energy barrier where the tables say so, with a transmission coefficient of 1.',
  map: 'Maps of two bonds were relaxed in every cell of the grid with both torsions held, each cell started again from its neighbors’ best geometries until no energy fell further; minima were then minimized freely, and the lowest way between two of them is the one whose highest cell is lowest.',
  conjugation:
    'Conjugated bonds were described by the twist between the local π axes, its overlap cos², and the energies of their s-cis and s-trans forms along a relaxed profile.',
  opinion:
    'Second opinions on torsion profiles come from the program xtb: GFN2-xTB energies on the MMFF94s geometries (a quick look, rough), or each geometry relaxed again by GFN2-xTB with the torsion held, its energy taken without the constraint, and GFN1-xTB energies at the GFN2-xTB geometries; the consensus is the plain mean of the three models, each above its own lowest point. Points that failed are gaps, listed with their reasons.',
  ranking:
    'Conformers were ranked again by GFN2-xTB with the program xtb, as they were or each relaxed; those that fell together were merged.',
  heat: 'Heats of formation at 298 K are those of PM7 by the program mopac, the lowest among the lowest MMFF94s conformers, each relaxed by PM7.',
  strain:
    'Strain of given geometries was measured after relaxing hydrogens and then all atoms within a flat-bottomed tether, as energy above the lowest conformer found; the strain of single torsions was read from profiles of fragments.',
};

/** How the files of a bundle are computed anew, in Markdown. */
export const COMPUTE_AGAIN = `## Computing it again

\`requests.jsonl\` holds a line for every answer, in the order of the manifest: the structure and the settings that the answer rests on. In a clone of Windlass of the same version

    npm run --silent compute -- --lines < requests.jsonl

writes the answers again, a line each, with the same numbers.
`;
/** The force fields among the models, for the sentence that names them. */
function ownModels(models: readonly string[]): string {
  return models.filter((model) => model.startsWith('MMFF')).join(' and ') || 'MMFF94s';
}

/** What further models are, where they were asked. */
const MODEL_REFERENCES: Readonly<Record<string, string>> = {
  'GFN2-xTB':
    'C. Bannwarth, S. Ehlert, S. Grimme, J. Chem. Theory Comput. 2019, 15, 1652-1671 (GFN2-xTB).',
  'GFN1-xTB':
    'S. Grimme, C. Bannwarth, P. Shushkov, J. Chem. Theory Comput. 2017, 13, 1989-2009 (GFN1-xTB).',
  PM7: 'J. J. P. Stewart, J. Mol. Model. 2013, 19, 1-32 (PM7).',
};

/** A text in Markdown, ready to paste: what was done, the literature, and how far to trust it. */
export function methodsText({ engineVersion, models, kinds }: MethodFacts): string {
  const sentences = kinds.flatMap((kind) => SENTENCES[kind] ?? []);
  const cited = [
    REFERENCES.mmff94,
    ...Object.entries(MODEL_REFERENCES).flatMap(([model, reference]) =>
      models.some((each) => each.split(', ').includes(model)) ? [reference] : [],
    ),
    ...(models.includes('MMFF94s') ? [REFERENCES.mmff94s] : []),
    ...(kinds.includes('scan') || kinds.includes('conformers') ? [REFERENCES.grimme] : []),
    ...(kinds.includes('scan')
      ? [REFERENCES.labels, REFERENCES.eyring, REFERENCES.atropisomers]
      : []),
  ];
  return [
    '# Methods',
    '',
    `Energies and geometries were computed with Windlass ${engineVersion} and the ${ownModels(models)} force field in the gas phase, unless a dielectric is named in the settings. ${sentences.join(' ')}`,
    '',
    '## Literature',
    '',
    ...cited.map((reference) => `- ${reference}`),
    '',
    '## Cautions',
    '',
    'These are model energies, typically 0.5 to 2 kcal/mol off, and more for charged, metal-bearing or strongly conjugated systems. They are estimates, not measurements: a decision about a reaction’s heat, a substance’s stability or a person’s safety rests on experiment, the safety data sheet, local rules and qualified people.',
    '',
  ].join('\n');
}
