/** The demo's two batches; like everybody's, they are computed by the worker. */
import { planSchema, readingSchema } from '../domain/submission';
import { db } from './db';
import { batches } from './db/schema';
import { eq } from 'drizzle-orm';
import { readUpload } from './drafts';
import type { Member } from './member';
import { submit } from './submission';

const dienes = `
C=CC=C buta-1,3-diene
C=CC(=C)C isoprene
C=C(C)C(=C)C 2,3-dimethylbuta-1,3-diene
C=C/C=C/C (E)-penta-1,3-diene
C=C/C=C\\C (Z)-penta-1,3-diene
C=CC(=C)Cl chloroprene
C=CC(=C)C(C)(C)C 2-tert-butylbuta-1,3-diene
`;

/** The last row fails: MMFF94 has no parameters for boron. */
const biaryls = `
c1ccccc1-c1ccccc1 biphenyl
Cc1ccccc1-c1ccccc1C 2,2'-dimethylbiphenyl
c1ccsc1-c1cccs1 2,2'-bithiophene
c1ccccc1-c1ccccn1 2-phenylpyridine
Cc1ccccc1-c1ccccc1 2-methylbiphenyl
OB(O)c1ccccc1-c1ccccc1 biphenyl-2-boronic acid
`;

const plan = planSchema.parse({
  conformers: { effort: 'quick' },
  scans: { bonds: 'conjugated' },
  conjugation: {},
});

async function* bytesOf(text: string): AsyncGenerator<Uint8Array> {
  yield new TextEncoder().encode(text);
}

/** Submits the demo's batches as a member of its team, once. */
export async function submitDemoBatches(member: Member): Promise<void> {
  if ((await db.$count(batches, eq(batches.teamId, member.teamId))) > 0) return;
  for (const [name, text] of [
    ['Dienes for the primer', dienes],
    ['Biaryls for the topcoat', biaryls],
  ]) {
    const options = {
      name,
      source: 'paste',
      format: 'smi',
      reading: readingSchema.parse({}),
    } as const;
    const draft = await readUpload(member, options, bytesOf(text), () => undefined);
    await submit(member, draft, plan);
  }
}
