/** Links by which partners without an account see one batch or molecule and take its bundle, and nothing else. */
import { and, desc, eq, gt, isNull, sql } from 'drizzle-orm';
import { createHmac, timingSafeEqual } from 'node:crypto';
import type { PartnerLinkForm } from '../domain/partner-links';
import * as batches from './batches';
import { packBatch, packMolecule, type Bundle } from './bundles';
import { db } from './db';
import { partnerLinks, teams, users } from './db/schema';
import { environment } from './environment';
import { recordEvent } from './events';
import { notFound, require, type InTeam, type Member } from './member';
import * as molecules from './molecules';
import { hashPassword, verifyPassword } from './passwords';
import { hashSecret, makeSecret } from './secrets';

type PartnerLink = typeof partnerLinks.$inferSelect;

const isOpen = and(isNull(partnerLinks.revokedAt), gt(partnerLinks.expiresAt, sql`now()`));

const subjectOf = ({ batchId, moleculeId }: Pick<PartnerLink, 'batchId' | 'moleculeId'>) =>
  batchId === null ? `molecule:${moleculeId}` : `batch:${batchId}`;

/** The id of a batch that can be shared: a draft cannot. */
async function submittedBatch(member: Member, batchId: string): Promise<string> {
  const batch = await batches.get(member, batchId);
  return batch.submittedAt ? batch.id : notFound('batch');
}

/** Makes a link to a batch or molecule of the member's team; the answered secret is told only now. */
export async function create(member: Member, form: PartnerLinkForm): Promise<string> {
  require(member, 'share with partners');
  const [kind, id] = form.subject.split(':');
  const batchId = kind === 'batch' ? await submittedBatch(member, id) : null;
  const moleculeId = kind === 'molecule' ? (await molecules.get(member, id)).id : null;
  const secret = makeSecret();
  const passwordHash = form.password === '' ? null : await hashPassword(form.password);
  await db.transaction(async (tx) => {
    await tx.insert(partnerLinks).values({
      teamId: member.teamId,
      batchId,
      moleculeId,
      tokenHash: hashSecret(secret),
      passwordHash,
      createdBy: member.userId,
      expiresAt: sql`now() + make_interval(days => ${form.days})`,
    });
    await recordEvent(tx, member, 'make partner link', form.subject, {
      days: form.days,
      password: passwordHash !== null,
    });
  });
  return secret;
}

/** The team's links that are still good, the newest first. */
export function listOpen(member: Member) {
  require(member, 'share with partners');
  return db
    .select({
      id: partnerLinks.id,
      batchId: partnerLinks.batchId,
      moleculeId: partnerLinks.moleculeId,
      hasPassword: sql<boolean>`${partnerLinks.passwordHash} is not null`,
      maker: users.name,
      createdAt: partnerLinks.createdAt,
      expiresAt: partnerLinks.expiresAt,
      downloads: partnerLinks.downloads,
    })
    .from(partnerLinks)
    .leftJoin(users, eq(users.id, partnerLinks.createdBy))
    .where(and(eq(partnerLinks.teamId, member.teamId), isOpen))
    .orderBy(desc(partnerLinks.createdAt));
}

/** Ends a link at once; false when it is not an open one of the team. */
export async function revoke(member: Member, linkId: string): Promise<boolean> {
  require(member, 'share with partners');
  return db.transaction(async (tx) => {
    const [revoked] = await tx
      .update(partnerLinks)
      .set({ revokedAt: sql`now()` })
      .where(and(eq(partnerLinks.id, linkId), eq(partnerLinks.teamId, member.teamId), isOpen))
      .returning();
    if (!revoked) return false;
    await recordEvent(tx, member, 'revoke partner link', subjectOf(revoked));
    return true;
  });
}

/** The open link of a secret; null when it does not work (any more). */
export async function find(secret: string): Promise<PartnerLink | null> {
  const [link] = await db
    .select()
    .from(partnerLinks)
    .where(and(eq(partnerLinks.tokenHash, hashSecret(secret)), isOpen));
  return link ?? null;
}

/** The name of what is shared: a batch's own, or the one a molecule was sent with. */
export async function nameOf(
  team: InTeam,
  subject: Pick<PartnerLink, 'batchId' | 'moleculeId'>,
): Promise<string> {
  if (subject.batchId !== null) return (await batches.get(team, subject.batchId)).name;
  return molecules.nameOf(await molecules.get(team, subject.moleculeId!));
}

/** What a partner is told of the thing shared. */
export async function describe(link: PartnerLink) {
  const [team] = await db.select({ name: teams.name }).from(teams).where(eq(teams.id, link.teamId));
  return {
    name: await nameOf(link, link),
    kind: link.batchId === null ? ('molecule' as const) : ('batch' as const),
    team: team!.name,
    expiresAt: link.expiresAt,
  };
}

/** Proof that somebody gave the password of this link; it ends with the link and with a change of the password. */
function proofOf({ id, passwordHash }: PartnerLink): Buffer {
  return createHmac('sha256', environment.AUTH_SECRET)
    .update(`partner link\0${id}\0${passwordHash}`)
    .digest();
}

/** Checks the password; answers the proof to be kept by the browser, or null when it is wrong. */
export async function unlock(link: PartnerLink, password: string): Promise<string | null> {
  const isRight = await verifyPassword(link.passwordHash, password);
  return isRight ? proofOf(link).toString('base64url') : null;
}

/** True when the link needs no password or the proof is of it. */
export function isUnlocked(link: PartnerLink, proof: string | undefined): boolean {
  if (link.passwordHash === null) return true;
  const expected = proofOf(link);
  const given = Buffer.from(proof ?? '', 'base64url');
  return given.length === expected.length && timingSafeEqual(given, expected);
}

/** The bundle of what is shared; the download is counted and recorded. */
export async function download(link: PartnerLink, address: string): Promise<Bundle> {
  const bundle =
    link.batchId === null
      ? await packMolecule(link, link.moleculeId!)
      : await packBatch(link, link.batchId);
  await db.transaction(async (tx) => {
    await tx
      .update(partnerLinks)
      .set({ downloads: sql`${partnerLinks.downloads} + 1` })
      .where(eq(partnerLinks.id, link.id));
    const partner = { teamId: link.teamId, userId: null, address };
    await recordEvent(tx, partner, 'download by partner link', subjectOf(link), { link: link.id });
  });
  return bundle;
}
