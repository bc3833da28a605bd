import { operations } from '$lib/domain/api';
import { resultIdsOf, summarize } from '$lib/server/answers';
import { serve } from '$lib/server/api';
import * as molecules from '$lib/server/molecules';

export const GET = serve(operations.getMolecule, async ({ member, id }) => {
  const molecule = await molecules.get(member, id('id'));
  return {
    id: molecule.id,
    smiles: molecule.smiles,
    formula: molecule.formula,
    atoms: molecule.atomCount,
    results: await summarize(await resultIdsOf(member, molecule.id)),
  };
});
