/** Conformer search of ibuprofen: the lowest energy and the time against RDKit's 600 conformers. */
import { compute } from '../support/compute';
import { ibuprofen } from './molecules';
import { askRdkit } from './rdkit';
import { markdownTable, ratio } from './report';
import { fastest } from './timing';

const RDKIT_CONFORMERS = 600;

/** The section's report in Markdown. */
export async function searchSection(rdkit: boolean): Promise<string> {
  const { smiles } = ibuprofen;
  const ours = await fastest(() => compute({ smiles }, 'conformers', {}));
  const [lowest] = ours.value.conformers;
  const rows = [
    [
      'ours',
      ours.seconds.toFixed(2),
      lowest.energy.toFixed(4),
      `${ours.value.conformers.length} conformers, complete: ${ours.value.complete}`,
    ],
  ];
  if (rdkit) {
    const theirs = askRdkit('conformers', { smiles, count: RDKIT_CONFORMERS });
    rows.push([
      'RDKit',
      theirs.seconds.toFixed(2),
      theirs.lowest.toFixed(4),
      `${RDKIT_CONFORMERS} conformers, ${theirs.embedding.toFixed(2)} s of it embedding; ours is ${ratio(theirs.seconds, ours.seconds)} times as fast`,
    ]);
  }
  return `## Conformer search, ibuprofen, MMFF94s\n\n${markdownTable(['program', 'seconds', 'lowest, kcal/mol', ''], rows)}`;
}
