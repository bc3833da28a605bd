/** Tokens, idempotency and submissions of programs, against a real database. */
import { eq, sql } from 'drizzle-orm';
import { describe, expect, it } from 'vitest';
import { newBatchSchema } from '$lib/domain/api';
import { submitRequest } from '$lib/server/api-submission';
import * as apiTokens from '$lib/server/api-tokens';
import * as lists from '$lib/server/batch-lists';
import { db } from '$lib/server/db';
import { apiTokens as tokenRows, batches as batchRows, memberships } from '$lib/server/db/schema';
import { once } from '$lib/server/idempotency';
import { newTeam } from '../support/people';

const given = { name: 'nightly', scope: 'submit', days: 30 } as const;

describe('a token', () => {
  it('speaks for its person in one team, with the role they have at that moment', async () => {
    const { modeler } = await newTeam();
    const token = await apiTokens.create(modeler, given);
    const bearer = await apiTokens.findBearer(token, '192.0.2.5');
    expect(bearer).toMatchObject({ scopes: ['read', 'submit'], member: { ...modeler } });
    await db
      .update(memberships)
      .set({ role: 'reader' })
      .where(eq(memberships.userId, modeler.userId));
    expect((await apiTokens.findBearer(token, ''))?.member.role).toBe('reader');
    await db.delete(memberships).where(eq(memberships.userId, modeler.userId));
    expect(await apiTokens.findBearer(token, '')).toBeNull();
  });

  it('is stored as a hash, and ends by its person’s will or with its time', async () => {
    const { chemist, lead } = await newTeam();
    const token = await apiTokens.create(chemist, { ...given, scope: 'read' });
    expect(JSON.stringify(await db.select().from(tokenRows))).not.toContain(token);
    const [{ id }] = await apiTokens.list(chemist);
    expect(await apiTokens.revoke(lead, id)).toBe(false);
    expect(await apiTokens.revoke(chemist, id)).toBe(true);
    expect(await apiTokens.findBearer(token, '')).toBeNull();
    const old = await apiTokens.create(chemist, given);
    await db
      .update(tokenRows)
      .set({ expiresAt: sql`now() - interval '1 second'` })
      .where(eq(tokenRows.userId, chemist.userId));
    expect(await apiTokens.findBearer(old, '')).toBeNull();
  });
});

describe('a submission', () => {
  const request = newBatchSchema.parse({
    name: 'Dienes',
    molecules: [
      { name: 'butadiene', molecule: { smiles: 'C=CC=C' } },
      { molecule: { smiles: 'C=CC(' } },
    ],
    plan: { scans: { bonds: 'conjugated' } },
  });

  it('keeps a bad row with its reason and queues the good one', async () => {
    const { chemist } = await newTeam();
    const answer = await submitRequest(chemist, request);
    expect(answer).toMatchObject({ queued: 1, reused: 0, rows: 2, errors: 1 });
    const rows = await lists.listEntriesAfter(chemist, answer.id, 0, 10);
    expect(rows.map(({ verdict, counts }) => [verdict, counts.queued])).toEqual([
      ['ready', 1],
      ['error', 0],
    ]);
  });

  it('that nothing can be computed of leaves nothing behind', async () => {
    const { chemist } = await newTeam();
    const bad = { ...request, molecules: request.molecules.slice(1) };
    await expect(submitRequest(chemist, bad)).rejects.toMatchObject({ status: 422 });
    expect(await db.$count(batchRows, eq(batchRows.teamId, chemist.teamId))).toBe(0);
  });

  it('is refused to readers', async () => {
    const { reader } = await newTeam();
    await expect(submitRequest(reader, request)).rejects.toMatchObject({ status: 403 });
  });

  it('is listed without gap or repetition, page after page', async () => {
    const { chemist } = await newTeam();
    await db.insert(batchRows).values(
      Array.from({ length: 7 }, (_, n) => ({
        teamId: chemist.teamId,
        createdBy: chemist.userId,
        name: `Batch ${n}`,
        source: 'program' as const,
        plan: {},
        // Within one millisecond, which a page must not lose.
        submittedAt: sql`'2026-01-01'::timestamptz + make_interval(secs => ${n % 3} * 1e-6)`,
      })),
    );
    const seen: string[] = [];
    let after: lists.AfterBatch | null = null;
    do {
      const page: Awaited<ReturnType<typeof lists.listAfter>> = await lists.listAfter(
        chemist,
        after,
        2,
      );
      seen.push(...page.map(({ id }) => id));
      const last = page.at(-1);
      after = last ? [last.place, last.id] : null;
    } while (after);
    expect(new Set(seen).size).toBe(7);
    expect(seen).toHaveLength(7);
  });
});

describe('an idempotency key', () => {
  it('carries a request out once and answers it the same', async () => {
    const { chemist } = await newTeam();
    let times = 0;
    const carryOut = () => Promise.resolve({ times: (times += 1) });
    expect(await once(chemist, 'a', 'body', carryOut)).toEqual({ times: 1 });
    expect(await once(chemist, 'a', 'body', carryOut)).toEqual({ times: 1 });
    expect(await once(chemist, 'b', 'body', carryOut)).toEqual({ times: 2 });
    expect(await once((await newTeam()).chemist, 'a', 'body', carryOut)).toEqual({ times: 3 });
  });

  it('is refused for another request, and while the first one is under way', async () => {
    const { chemist } = await newTeam();
    await once(chemist, 'a', 'body', () => Promise.resolve(1));
    await expect(once(chemist, 'a', 'other', () => Promise.resolve(2))).rejects.toMatchObject({
      status: 422,
    });
    let finish = (_value: number) => undefined as void;
    const first = once(
      chemist,
      'slow',
      'body',
      () => new Promise<number>((resolve) => (finish = resolve)),
    );
    await expect
      .poll(() => once(chemist, 'slow', 'body', () => Promise.resolve(9)).catch((e) => e.status))
      .toBe(409);
    finish(5);
    expect(await first).toBe(5);
  });

  it('can be used again after a failure', async () => {
    const { chemist } = await newTeam();
    await expect(once(chemist, 'a', 'body', () => Promise.reject(new Error('no')))).rejects.toThrow(
      'no',
    );
    expect(await once(chemist, 'a', 'body', () => Promise.resolve(1))).toBe(1);
  });
});
