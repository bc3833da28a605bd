/** Taking all out that a team has, and its end: asked for, undone, carried out; other teams keep what is theirs. */
import { randomUUID } from 'node:crypto';
import { buffer } from 'node:stream/consumers';
import { unzipSync, strFromU8 } from 'fflate';
import { and, eq, inArray, sql } from 'drizzle-orm';
import { afterAll, describe, expect, it } from 'vitest';
import { planSchema, readingSchema } from '$lib/domain/submission';
import * as apiTokens from '$lib/server/api-tokens';
import { db } from '$lib/server/db';
import {
  apiTokens as tokenTable,
  batches,
  entries,
  events,
  letters,
  memberships,
  molecules,
  notes,
  partnerLinks,
  results,
  tasks,
  teams,
  users,
} from '$lib/server/db/schema';
import { readUpload } from '$lib/server/drafts';
import type { Member } from '$lib/server/member';
import * as links from '$lib/server/partner-links';
import { stopQueue } from '$lib/server/queue';
import { submit } from '$lib/server/submission';
import {
  askDeletion,
  deleteDueTeams,
  DELETION_DAYS,
  undoDeletion,
} from '$lib/server/team-deletion';
import { exportTeam } from '$lib/server/team-export';
import { bytesOf, performAll } from '../support/batches';
import { newTeam } from '../support/people';

afterAll(stopQueue);

const inDays = (days: number) => new Date(Date.now() + days * 86_400_000);
const plan = planSchema.parse({ conformers: { effort: 'quick' } });

async function newBatch(member: Member, text: string, name: string): Promise<string> {
  const reading = readingSchema.parse({});
  const options = { name, source: 'paste', format: 'smi', reading } as const;
  const id = await readUpload(member, options, bytesOf(text), () => undefined);
  await submit(member, id, plan);
  return id;
}

/** A team with a finished batch, one that waits, a draft, a note, a link and a token. */
async function fullTeam() {
  const team = await newTeam();
  const done = await newBatch(team.chemist, 'CCCC butane\nnonsense', 'Done');
  await performAll(done);
  const waiting = await newBatch(team.modeler, 'CCCCC pentane', 'Waiting');
  const [{ moleculeId }] = await db
    .select()
    .from(entries)
    .where(and(eq(entries.batchId, done), eq(entries.verdict, 'ready')));
  await db.insert(notes).values({
    teamId: team.lead.teamId,
    moleculeId: moleculeId!,
    authorId: team.lead.userId,
    text: 'Floppy, =SUM(1)',
  });
  const link = await links.create(team.modeler, {
    subject: `batch:${done}`,
    days: 7,
    password: 'nine wet lanterns',
  });
  const token = await apiTokens.create(team.lead, { name: 'script', scope: 'read', days: 7 });
  const [{ name }] = await db.select().from(teams).where(eq(teams.id, team.lead.teamId));
  return { ...team, done, waiting, name, secrets: [JSON.stringify(link), token] };
}

const lettersTo = async ({ userId }: Member) =>
  (
    await db
      .select({ subject: letters.subject })
      .from(letters)
      .innerJoin(users, eq(users.email, letters.address))
      .where(eq(users.id, userId))
      .orderBy(letters.createdAt)
  ).map(({ subject }) => subject);
const exists = async ({ teamId }: Member) => (await db.$count(teams, eq(teams.id, teamId))) === 1;

describe('the export', () => {
  it('holds all that the team has, and nothing of others or secret', async () => {
    const team = await fullTeam();
    const other = await fullTeam();
    const { archive, fileName } = await exportTeam(team.lead);
    expect(fileName).toMatch(/everything[.]zip$/);
    const files = unzipSync(await buffer(archive));
    const text = Object.fromEntries(
      Object.entries(files).map(([path, bytes]) => [path, strFromU8(bytes)]),
    );
    const paths = Object.keys(text);
    expect(paths).toEqual(
      expect.arrayContaining([
        'README.md',
        'team.json',
        'members.csv',
        'batches.csv',
        'batches/Done/rows.csv',
        'batches/Done/butane/conformers.json',
        'batches/Done/butane/conformers.sdf',
        'batches/Waiting/rows.csv',
        'molecules.csv',
        'notes.csv',
        'partner-links.csv',
        'record.csv',
        'methods.md',
        'answer.schema.json',
        'manifest.json',
      ]),
    );
    const { sha256 } = JSON.parse(text['manifest.json']) as { sha256: Record<string, string> };
    expect(Object.keys(sha256).sort()).toEqual(
      paths.filter((path) => path !== 'manifest.json').sort(),
    );
    expect(JSON.parse(text['team.json'])).toMatchObject({ name: team.name });
    expect(text['batches/Done/rows.csv']).toContain('nonsense');
    expect(text['notes.csv']).toContain('Floppy');
    expect(text['record.csv']).toContain('export team');
    const all = Object.values(text).join('\n');
    expect(all).not.toContain(other.name);
    expect(all).not.toContain(other.lead.teamId);
    expect(all).not.toContain(other.done);
    const hashes = await db
      .select({ link: partnerLinks.tokenHash, password: partnerLinks.passwordHash })
      .from(partnerLinks)
      .where(eq(partnerLinks.teamId, team.lead.teamId));
    expect(hashes).toHaveLength(1);
    for (const { link, password } of hashes) {
      expect(all).not.toContain(link);
      expect(all).not.toContain(password);
    }
    expect(all).not.toContain(team.secrets[1]);
    await expect(exportTeam(team.modeler)).rejects.toMatchObject({ status: 403 });
  });
});

describe('the deletion of a team', () => {
  it('is for leads who type the name, and tells all leads', async () => {
    const { lead, modeler, name, ...others } = await fullTeam();
    const second = others.chemist;
    await db.update(memberships).set({ role: 'lead' }).where(eq(memberships.userId, second.userId));
    await expect(askDeletion(modeler, name)).rejects.toMatchObject({ status: 403 });
    expect(await askDeletion(lead, `${name}?`)).toBe('wrong name');
    expect(await askDeletion(lead, name)).toBe('done');
    expect(await askDeletion(lead, name)).toBe('asked already');
    for (const each of [lead, second]) {
      expect(await lettersTo(each)).toEqual([expect.stringMatching(`^${name} will be deleted on`)]);
    }
    expect(await lettersTo(modeler)).toEqual([]);
    await deleteDueTeams(inDays(DELETION_DAYS - 0.1));
    expect(await exists(lead)).toBe(true);
  });

  it('is undone by any lead, and then nothing goes', async () => {
    const { lead, modeler, name } = await fullTeam();
    await askDeletion(lead, name);
    await expect(undoDeletion(modeler)).rejects.toMatchObject({ status: 403 });
    expect(await undoDeletion({ ...lead })).toBe(true);
    expect(await undoDeletion(lead)).toBe(false);
    await deleteDueTeams(inDays(DELETION_DAYS + 1));
    expect(await exists(lead)).toBe(true);
    const recorded = await db
      .select({ action: events.action })
      .from(events)
      .where(and(eq(events.teamId, lead.teamId), sql`${events.action} like '%deletion%'`))
      .orderBy(events.id);
    expect(recorded.map(({ action }) => action)).toEqual(['ask for deletion', 'undo deletion']);
  });

  it('takes all of it and nothing else, once, with a last letter', async () => {
    const { lead, chemist, name, done, waiting } = await fullTeam();
    const other = await fullTeam();
    await askDeletion(lead, name);
    const [{ id: waitingTask }] = await db.select().from(tasks).where(eq(tasks.batchId, waiting));
    const later = inDays(DELETION_DAYS + 1);
    await Promise.all([deleteDueTeams(later), deleteDueTeams(later)]);
    expect(await exists(lead)).toBe(false);
    for (const table of [
      batches,
      molecules,
      results,
      notes,
      partnerLinks,
      tokenTable,
      memberships,
      events,
    ]) {
      expect(await db.$count(table, eq(table.teamId, lead.teamId))).toBe(0);
      expect(await db.$count(table, eq(table.teamId, other.lead.teamId))).toBeGreaterThan(0);
    }
    expect(await db.$count(entries, inArray(entries.batchId, [done, waiting]))).toBe(0);
    const jobs = await db.execute(sql`select 1 from pgboss.job where id = ${waitingTask}`);
    expect(jobs).toHaveLength(0);
    expect(await lettersTo(lead)).toEqual([
      expect.stringContaining('will be deleted'),
      `${name} was deleted`,
    ]);
    expect(await db.$count(users, inArray(users.id, [lead.userId, chemist.userId]))).toBe(2);
  });

  it('is the only way by which lines leave the record', async () => {
    const { lead } = await fullTeam();
    await expect(db.delete(events).where(eq(events.teamId, lead.teamId))).rejects.toThrow();
    await expect(
      db.update(events).set({ action: randomUUID() }).where(eq(events.teamId, lead.teamId)),
    ).rejects.toThrow();
    // Somebody whose account is deleted leaves their lines behind, without the name.
    const before = await db.$count(events, eq(events.teamId, lead.teamId));
    await db.delete(users).where(eq(users.id, lead.userId));
    expect(await db.$count(events, eq(events.teamId, lead.teamId))).toBe(before);
  });
});
