/** A whole submission in one request: rows are read into a draft, and the draft is submitted. */
import { error } from '@sveltejs/kit';
import type { z } from 'zod';
import type { newBatchSchema } from '../domain/api';
import { discardDraft, readIntoDraft, type ReadingProgress } from './drafts';
import { require, type Member } from './member';
import { limitRate } from './rate-limits';
import { LimitError, SubmissionError } from './refusals';
import type { RawRow } from './rows';
import { submit } from './submission';

type NewBatch = z.output<typeof newBatchSchema>;

async function* rowsOf({ molecules }: NewBatch): AsyncGenerator<RawRow> {
  for (const [index, { name, molecule }] of molecules.entries()) {
    const line = index + 1;
    yield 'smiles' in molecule
      ? { line, name, format: 'smiles', text: molecule.smiles }
      : { line, name, format: 'molfile', text: molecule.molfile };
  }
}

/**
 * Reads and submits; what cannot be submitted leaves nothing behind and answers 422 with the reason,
 * above a limit 403 or 429.
 */
export async function submitRequest(member: Member, request: NewBatch) {
  require(member, 'submit molecules');
  const wait = await limitRate(['submit as a member', member.userId]);
  if (wait !== null) error(429, `That was a lot of submissions. Wait ${wait} seconds.`);
  let read: ReadingProgress = { rows: 0, errors: 0 };
  const draft = { name: request.name, source: 'program' as const, reading: request.reading };
  const id = await readIntoDraft(member, draft, rowsOf(request), (progress) => {
    read = progress;
  });
  try {
    return { id, ...(await submit(member, id, request.plan)), ...read };
  } catch (cause) {
    await discardDraft(member, id);
    if (cause instanceof LimitError) error(cause.status, cause.message);
    if (cause instanceof SubmissionError) error(422, cause.message);
    throw cause;
  }
}
