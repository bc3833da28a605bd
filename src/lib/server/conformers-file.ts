/** Chosen conformers as a file of their own. */
import { safeName } from '../domain/file-names';
import { readAnswers, resultIdsOf } from './answers';
import { conformersSdf } from './bundle-files';
import { db } from './db';
import { recordEvent } from './events';
import { notFound, require, type Member } from './member';
import * as molecules from './molecules';

/** The conformers of these ranks (0 is the lowest; none means all) of one of the molecule's answers, as SDF. */
export async function conformersFile(
  member: Member,
  moleculeId: string,
  resultId: string,
  ranks: readonly number[],
): Promise<{ fileName: string; content: string }> {
  require(member, 'download bundles');
  const stored = await molecules.get(member, moleculeId);
  if (!(await resultIdsOf(member, stored.id)).includes(resultId)) notFound('result');
  const [answer] = await readAnswers([resultId], stored.atomCount);
  const conformers = answer.conformers.filter(
    ({ rank }) => ranks.length === 0 || ranks.includes(rank),
  );
  if (conformers.length === 0) notFound('conformer');
  const name = await molecules.nameOf(stored);
  await recordEvent(db, member, 'download conformers', stored.id);
  const content = conformersSdf(
    { name, smiles: stored.smiles, molecule: molecules.readStored(stored) },
    { ...answer, conformers },
  );
  return { fileName: `${safeName(name)}_conformers.sdf`, content };
}
