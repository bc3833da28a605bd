/** The demo's batches; like everybody's, they are computed by the worker. */
import { planSchema, readingSchema, type ChosenBonds } from '../domain/submission';
import { db } from './db';
import { batches } from './db/schema';
import { eq } from 'drizzle-orm';
import { listRows } from './batches';
import { packedBenzanilide } from './demo-structures';
import { chooseBonds, readUpload, type DraftOptions } from './drafts';
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

/** What a given geometry is asked: its strain, and how its two rings turn together. */
const posePlan = planSchema.parse({ strain: {}, maps: { step: 30 } });
/** Ring to nitrogen, and ring to carbonyl carbon. */
const POSE_BONDS: ChosenBonds = [
  [2, 3],
  [1, 9],
];

async function* bytesOf(text: string): AsyncGenerator<Uint8Array> {
  yield new TextEncoder().encode(text);
}

/** Reads one of the demo's texts into a draft. */
function read(
  member: Member,
  name: string,
  text: string,
  options: Pick<DraftOptions, 'source' | 'format'>,
): Promise<string> {
  const draft = { name, reading: readingSchema.parse({}), ...options };
  return readUpload(member, draft, bytesOf(text), () => undefined);
}

async function submitPose(member: Member): Promise<void> {
  const options = { source: 'upload', format: 'mol' } as const;
  const draft = await read(member, 'Benzanilide, as packed', packedBenzanilide, options);
  const { rows } = await listRows(member, draft, 1, 1);
  await chooseBonds(member, draft, rows[0].id, { purpose: 'map', bonds: POSE_BONDS });
  await submit(member, draft, posePlan);
}

/** Submits the demo's batches as a member of its team, once. */
export async function submitDemoBatches(member: Member): Promise<void> {
  if ((await db.$count(batches, eq(batches.teamId, member.teamId))) > 0) return;
  const options = { source: 'paste', format: 'smi' } as const;
  await submit(member, await read(member, 'Dienes for the primer', dienes, options), plan);
  await submit(member, await read(member, 'Biaryls for the topcoat', biaryls, options), plan);
  await submitPose(member);
}
