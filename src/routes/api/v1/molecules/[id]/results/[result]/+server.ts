import { operations } from '$lib/domain/api';
import { readAnswers, resultIdsOf } from '$lib/server/answers';
import { serve } from '$lib/server/api';
import { asJson } from '$lib/server/bundle-files';
import { notFound } from '$lib/server/member';
import * as molecules from '$lib/server/molecules';

export const GET = serve(operations.getResult, async ({ member, id }) => {
  const molecule = await molecules.get(member, id('id'));
  const own = await resultIdsOf(member, molecule.id);
  const wanted = own.find((result) => result === id('result')) ?? notFound('result');
  const [answer] = await readAnswers([wanted], molecule.atomCount);
  const name = await molecules.nameOf(molecule);
  return asJson({ name, smiles: molecule.smiles }, answer);
});
