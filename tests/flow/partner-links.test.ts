/** Links for partners, against a real database. */
import { eq, sql } from 'drizzle-orm';
import { describe, expect, it } from 'vitest';
import { db } from '$lib/server/db';
import { batches, events, molecules, partnerLinks } from '$lib/server/db/schema';
import type { Member } from '$lib/server/member';
import * as links from '$lib/server/partner-links';
import { newTeam } from '../support/people';

async function newBatch(member: Member, isSubmitted = true): Promise<string> {
  const [batch] = await db
    .insert(batches)
    .values({
      teamId: member.teamId,
      createdBy: member.userId,
      name: 'Dienes',
      source: 'paste',
      plan: {},
      submittedAt: isSubmitted ? new Date() : null,
    })
    .returning({ id: batches.id });
  return batch!.id;
}

async function share(member: Member, password = '') {
  const batchId = await newBatch(member);
  const secret = await links.create(member, { subject: `batch:${batchId}`, days: 7, password });
  return { batchId, secret, link: (await links.find(secret))! };
}

/** Reads a bundle to its end and answers its size in bytes. */
async function drain(stream: AsyncIterable<Buffer>): Promise<number> {
  let size = 0;
  for await (const piece of stream) size += piece.length;
  return size;
}

describe('a link for a partner', () => {
  it('tells the name of what is shared, and hands out its bundle, counted and recorded', async () => {
    const { modeler } = await newTeam();
    const { batchId, link } = await share(modeler);
    expect(await links.describe(link)).toMatchObject({ name: 'Dienes', kind: 'batch' });
    const bundle = await links.download(link, '192.0.2.33');
    expect(bundle.fileName).toBe('Dienes.zip');
    expect(await drain(bundle.archive)).toBeGreaterThan(100);
    expect(await links.listOpen(modeler)).toMatchObject([{ downloads: 1, hasPassword: false }]);
    const record = await db
      .select()
      .from(events)
      .where(eq(events.subject, `batch:${batchId}`));
    expect(record.map(({ action }) => action)).toEqual([
      'make partner link',
      'download by partner link',
    ]);
    expect(record[1]).toMatchObject({ actorId: null, address: '192.0.2.33' });
  });

  it('is stored so that nobody who reads the table can use it', async () => {
    const { modeler } = await newTeam();
    const { secret } = await share(modeler, 'a long winter');
    const stored = JSON.stringify(await db.select().from(partnerLinks));
    expect(stored).not.toContain(secret);
    expect(stored).not.toContain('a long winter');
    // 256 random bits in base64url.
    expect(secret).toMatch(/^[\w-]{43}$/);
  });

  it('ends at once when it is revoked, and with its time', async () => {
    const { lead, modeler } = await newTeam();
    const first = await share(modeler);
    expect(await links.revoke(lead, first.link.id)).toBe(true);
    expect(await links.find(first.secret)).toBeNull();
    expect(await links.revoke(lead, first.link.id)).toBe(false);
    const second = await share(modeler);
    await db
      .update(partnerLinks)
      .set({ expiresAt: sql`now() - interval '1 second'` })
      .where(eq(partnerLinks.id, second.link.id));
    expect(await links.find(second.secret)).toBeNull();
  });

  it('with a password opens only for who gives it', async () => {
    const { modeler } = await newTeam();
    const { link } = await share(modeler, 'a long winter');
    const other = await share(modeler, 'a long winter');
    expect(links.isUnlocked(link, undefined)).toBe(false);
    expect(await links.unlock(link, 'a short winter')).toBeNull();
    const proof = (await links.unlock(link, 'a long winter'))!;
    expect(links.isUnlocked(link, proof)).toBe(true);
    expect(links.isUnlocked(other.link, proof)).toBe(false);
  });

  it('is made by modelers and leads only, for what is their team’s and submitted', async () => {
    const [one, two] = [await newTeam(), await newTeam()];
    const batchId = await newBatch(one.modeler);
    const form = { subject: `batch:${batchId}`, days: 7, password: '' };
    await expect(links.create(one.chemist, form)).rejects.toMatchObject({ status: 403 });
    await expect(links.create(two.modeler, form)).rejects.toMatchObject({ status: 404 });
    const draft = { ...form, subject: `batch:${await newBatch(one.modeler, false)}` };
    await expect(links.create(one.modeler, draft)).rejects.toMatchObject({ status: 404 });
    const secret = await links.create(one.modeler, form);
    const link = (await links.find(secret))!;
    expect(await links.revoke(two.lead, link.id)).toBe(false);
    expect(await links.find(secret)).not.toBeNull();
  });

  it('can show a single molecule', async () => {
    const { modeler } = await newTeam();
    const [molecule] = await db
      .insert(molecules)
      .values({
        teamId: modeler.teamId,
        digest: 'butadiene',
        smiles: 'C=CC=C',
        formula: 'C4H6',
        atomCount: 10,
        rotors: [],
        format: 'smiles',
        structure: 'C=CC=C',
        hasGeometry: false,
      })
      .returning({ id: molecules.id });
    const subject = `molecule:${molecule!.id}`;
    const link = (await links.find(
      await links.create(modeler, { subject, days: 1, password: '' }),
    ))!;
    expect(await links.describe(link)).toMatchObject({ name: 'C4H6', kind: 'molecule' });
  });
});
