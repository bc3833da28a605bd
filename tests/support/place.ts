/** A team with something of everything that a request can be about, for asking who may do what with it. */
import { eq } from 'drizzle-orm';
import { randomUUID } from 'node:crypto';
import { newBatchSchema } from '$lib/domain/api';
import { newNoteSchema } from '$lib/domain/notes';
import type { Role } from '$lib/domain/roles';
import { readingSchema } from '$lib/domain/submission';
import { submitRequest } from '$lib/server/api-submission';
import * as apiTokens from '$lib/server/api-tokens';
import * as lists from '$lib/server/batch-lists';
import * as batches from '$lib/server/batches';
import { readUpload } from '$lib/server/drafts';
import { db } from '$lib/server/db';
import { tasks } from '$lib/server/db/schema';
import * as invitations from '$lib/server/invitations';
import type { Member } from '$lib/server/member';
import { board } from '$lib/server/note-board';
import * as notes from '$lib/server/notes';
import * as partnerLinks from '$lib/server/partner-links';
import * as sessions from '$lib/server/sessions';
import * as webhooks from '$lib/server/webhooks';
import { client } from './accounts';
import { bytesOf } from './batches';
import { newTeam } from './people';

export interface Place {
  /** Stands in names and notes of the team, and nowhere else. */
  readonly marker: string;
  readonly people: Record<Role, Member>;
  readonly teamId: string;
  readonly batchId: string;
  readonly moleculeId: string;
  /** A task of the batch. */
  readonly taskId: string;
  /** The chemist's own: a batch that was not submitted yet, one of its rows, a note, a token and a sign-in. */
  readonly draftId: string;
  readonly draftRowId: string;
  readonly noteId: string;
  readonly tokenId: string;
  readonly sessionId: string;
  readonly invitationId: string;
  /** A webhook that is off, and a delivery of it. */
  readonly webhookId: string;
  readonly deliveryId: string;
  readonly linkId: string;
  readonly linkSecret: string;
  /** Answers, where they were computed; else ids that nothing has. */
  readonly resultId: string;
  readonly scanId: string;
}

async function openDraft(chemist: Member, name: string) {
  const options = { name, source: 'paste', format: 'smi' } as const;
  const reading = readingSchema.parse({});
  const text = bytesOf('C=CC=C butadiene');
  const draftId = await readUpload(chemist, { ...options, reading }, text, () => undefined);
  const { rows } = await batches.listRows(chemist, draftId, 1, 1);
  return { draftId, draftRowId: rows[0]!.id };
}

async function share(modeler: Member, batchId: string) {
  const form = { subject: `batch:${batchId}`, days: 7, password: '' };
  const linkSecret = await partnerLinks.create(modeler, form);
  const [link] = await partnerLinks.listOpen(modeler);
  return { linkSecret, linkId: link!.id };
}

async function addWebhook(lead: Member, name: string) {
  const { id: webhookId } = await webhooks.create(lead, { name, url: 'https://9.9.9.9/hook' });
  await webhooks.switchTo(lead, webhookId, false);
  return { webhookId, deliveryId: await webhooks.sendTest(lead, webhookId) };
}

async function writeNote(chemist: Member, moleculeId: string, text: string): Promise<string> {
  const given = { text, subject: 'molecule', parent: '' };
  await notes.write(chemist, moleculeId, newNoteSchema.parse(given));
  const { threads } = await board(chemist, moleculeId);
  return threads[0]!.id;
}

/** Makes a place whose batch is queued. */
export async function newPlace(): Promise<Place> {
  const people = await newTeam();
  const { chemist, modeler, lead } = people;
  const marker = `Heron-${randomUUID().slice(0, 8)}`;
  const request = newBatchSchema.parse({
    name: marker,
    molecules: [{ name: marker, molecule: { smiles: 'CCCC' } }],
    plan: {
      conformers: { effort: 'quick' },
      scans: { bonds: 'rotatable', relaxed: false, step: 30 },
    },
  });
  const { id: batchId } = await submitRequest(chemist, request);
  const [entry] = await lists.listEntriesAfter(chemist, batchId, 0, 1);
  const moleculeId = entry!.moleculeId!;
  const [task] = await db.select().from(tasks).where(eq(tasks.batchId, batchId));
  await apiTokens.create(chemist, { name: marker, scope: 'read', days: 7 });
  const [token] = await apiTokens.list(chemist);
  await invitations.invite(lead, {
    email: `${marker}@people.example`.toLowerCase(),
    role: 'reader',
  });
  const [invitation] = await invitations.listOpen(lead);
  return {
    marker,
    people,
    teamId: lead.teamId,
    batchId,
    moleculeId,
    taskId: task!.id,
    ...(await openDraft(chemist, marker)),
    noteId: await writeNote(chemist, moleculeId, marker),
    tokenId: token!.id,
    sessionId: await sessions.begin(chemist.userId, client),
    invitationId: invitation!.id,
    ...(await addWebhook(lead, marker)),
    ...(await share(modeler, batchId)),
    resultId: randomUUID(),
    scanId: randomUUID(),
  };
}
