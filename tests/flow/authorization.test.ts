/**
 * Who may do what: every way into the product, asked by everybody. The lines are in authorization-rows.ts, whose head says
 * how to add one. OWASP ASVS 5.0.0: 8.2.1, 8.2.2, 8.3.1, 8.4.1.
 */
import { eq } from 'drizzle-orm';
import { randomUUID } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ApiScope } from '$lib/domain/api';
import { roles, type Role } from '$lib/domain/roles';
import * as apiTokens from '$lib/server/api-tokens';
import { db } from '$lib/server/db';
import { results, teams } from '$lib/server/db/schema';
import type { Member } from '$lib/server/member';
import { stopQueue } from '$lib/server/queue';
import { byPassword } from '$lib/server/sessions';
import { performAll } from '../support/batches';
import { newTeam } from '../support/people';
import { newPlace, type Place } from '../support/place';
import { listWaysIn } from '../support/routes';
import { startWeb, type Web } from '../support/web';
import { rows, type Row } from './authorization-rows';

/** What came of a request, as far as permission goes. */
type Outcome =
  'through' | 'sign-in' | 'unknown' | 'forbidden' | 'missing' | 'required' | 'again' | 'broken';

interface Answer {
  readonly outcome: Outcome;
  readonly text: string;
}

const BUILD_PATIENCE_MS = 600_000;
let web: Web;
/** Read by many, changed by nobody. */
let place: Place;

beforeAll(async () => {
  web = await startWeb();
  const queued = await newPlace();
  await performAll(queued.batchId);
  const found = await db.select().from(results).where(eq(results.moleculeId, queued.moleculeId));
  const idOf = (kind: string) => found.find((result) => result.kind === kind)!.id;
  place = { ...queued, resultId: idOf('conformers'), scanId: idOf('scan') };
}, BUILD_PATIENCE_MS);

afterAll(async () => {
  await web.stop();
  await stopQueue();
});

const ways = Object.entries(rows).map(([way, row]) => ({ way, row }));
const isApi = ({ way }: { way: string }) => way.includes('/api/');
const isPost = (way: string) => !way.startsWith('GET ');

/** The address of a way: groups have none, and brackets are filled with what the place has. */
function addressOf(way: string, row: Row, { batchId, moleculeId, draftId, ...at }: Place): string {
  const [route, action] = way.slice(way.indexOf(' ') + 1).split('?') as [string, string?];
  const subjectId = route.includes('/preview')
    ? draftId
    : route.includes('/molecules/')
      ? moleculeId
      : route.includes('/webhooks/')
        ? at.webhookId
        : batchId;
  const fill: Record<string, string> = {
    '[id]': subjectId,
    '[result]': route.endsWith('/packed') ? at.scanId : at.resultId,
    '[token]': at.linkSecret,
  };
  const path = route
    .replace(/\/\(\w+\)/g, '')
    .replace(/\[[\w.]+\]/g, (name) => fill[name] ?? `unfilled-${name}`);
  const all = { batchId, moleculeId, draftId, ...at };
  const query = typeof row.query === 'function' ? row.query(all) : row.query;
  const search = [action, query].filter(Boolean).join('&');
  return `${path || '/'}${search ? `?${search}` : ''}`;
}

/** Reads an answer; streams that never end are not waited for. */
async function readAnswer(response: Response): Promise<Answer> {
  const type = response.headers.get('content-type') ?? '';
  const isReadable = /^(text\/(html|csv|plain)|application\/(json|problem)|image)/.test(type);
  const text = isReadable ? await response.text() : '';
  if (!isReadable) await response.body?.cancel();
  return { text, outcome: outcomeOf(response, type, text) };
}

function outcomeOf(response: Response, type: string, text: string): Outcome {
  const action = type.startsWith('application/json') && text.includes('"type":') ? text : '{}';
  const said = JSON.parse(action) as { type?: string; status?: number; location?: string };
  const status = said.type === 'failure' ? said.status! : response.status;
  const location = said.type === 'redirect' ? said.location! : response.headers.get('location');
  if (status >= 500) return 'broken';
  if (status === 401) return 'unknown';
  if (status === 403) return 'forbidden';
  if (status === 404) return 'missing';
  if (location?.startsWith('/sign-in?next')) return 'sign-in';
  if (location?.startsWith('/required')) return 'required';
  if (location?.startsWith('/again')) return 'again';
  return 'through';
}

/** Sends what an allowed person would send. */
async function ask(way: string, row: Row, at: Place, headers: Record<string, string>) {
  const method = way.slice(0, way.indexOf(' '));
  const isAction = isPost(way) && row.body === undefined;
  const given = typeof row.form === 'function' ? row.form(at) : (row.form ?? {});
  const body = typeof row.body === 'function' ? row.body(at) : row.body;
  const isJson = typeof body === 'object';
  const response = await fetch(`${web.origin}${addressOf(way, row, at)}`, {
    method,
    redirect: 'manual',
    headers: {
      origin: web.origin,
      // A form of a page that has script: the answer then says what came of it and nothing else.
      ...(isAction
        ? { accept: 'application/json', 'x-sveltekit-action': 'true' }
        : { accept: isPost(way) ? '*/*' : 'text/html' }),
      ...(isJson ? { 'content-type': 'application/json' } : {}),
      ...headers,
    },
    ...(isPost(way)
      ? {
          body: isAction
            ? new URLSearchParams(given)
            : isJson
              ? JSON.stringify(body)
              : String(body),
        }
      : {}),
  });
  return readAnswer(response);
}

const signedIn = async (member: Member) => ({ cookie: await web.signIn(member.userId) });

/** The outcome for a member of the object's own team. */
function expectedOf({ may }: Row, role: Role): readonly Outcome[] {
  switch (may) {
    case 'account':
    case 'member':
      return ['through'];
    case 'maker':
      return role === 'chemist' ? ['through'] : ['forbidden', 'missing'];
    case 'author':
      return role === 'chemist' || role === 'lead' ? ['through'] : ['forbidden'];
    case 'operator':
      return ['forbidden', 'missing'];
    default: {
      const isAllowed = roles.indexOf(role) >= roles.indexOf(may as Role);
      return isAllowed ? ['through'] : ['forbidden'];
    }
  }
}

describe('the table', () => {
  const elsewhere = ways.filter(({ row }) => row.may === 'elsewhere');

  it('has a line for every way in, and no line too many', () => {
    expect(Object.keys(rows).sort()).toEqual(listWaysIn());
  });

  it('leaves few ways to other tests', () => {
    expect(elsewhere.length).toBeLessThanOrEqual(6);
  });
});

describe('open to everybody', () => {
  it.each(ways.filter(({ row }) => row.may === 'public'))('$way', async ({ way, row }) => {
    const isShared = way.includes('[token]');
    const nobody = await ask(way, row, place, {});
    expect(['through', 'missing']).toContain(nobody.outcome);
    if (isShared) expect(nobody.outcome).toBe('through');
    else expect(nobody.text).not.toContain(place.marker);
    // A secret that nobody was given leads nowhere.
    if (isShared) {
      const wrong = { ...place, linkSecret: 'x'.repeat(place.linkSecret.length) };
      const answer = await ask(way, row, wrong, {});
      expect(answer.outcome).toBe('missing');
      expect(answer.text).not.toContain(place.marker);
    }
  });
});

const guarded = ways.filter((one) => !isApi(one) && !['public', 'elsewhere'].includes(one.row.may));

describe('for people who signed in', () => {
  it.each(guarded)('$way', async ({ way, row }) => {
    const nobody = await ask(way, row, place, {});
    // There is no such page for anybody but operators.
    const refused = row.may === 'operator' ? ['missing'] : ['sign-in', 'unknown'];
    expect(refused).toContain(nobody.outcome);
    expect(nobody.text).not.toContain(place.marker);
    for (const role of roles) {
      const expected = expectedOf(row, role);
      const isChanging = isPost(way) && !row.shared && expected.includes('through');
      const at = isChanging ? await newPlace() : place;
      const { outcome } = await ask(way, row, at, await signedIn(at.people[role]));
      expect(expected, `for a ${role}: ${outcome}`).toContain(outcome);
    }
  });
});

describe('for people of another team', () => {
  const isOwn = (row: Row) => row.foreign === 'own' || ['account', 'member'].includes(row.may);

  it.each(guarded)('$way', async ({ way, row }) => {
    const { lead } = await newTeam();
    const { outcome, text } = await ask(way, row, place, await signedIn(lead));
    const refused = row.may === 'operator' ? ['forbidden', 'missing'] : ['missing'];
    expect(isOwn(row) ? ['through'] : refused).toContain(outcome);
    expect(text).not.toContain(place.marker);
  });

  it.each(guarded.filter(({ way }) => !isPost(way)))('the data of $way', async ({ way, row }) => {
    const { lead } = await newTeam();
    const [path, search] = addressOf(way, row, place).split('?');
    const address = `${web.origin}${path}/__data.json${search ? `?${search}` : ''}`;
    for (const headers of [{}, await signedIn(lead)]) {
      const response = await fetch(address, { headers, redirect: 'manual' });
      expect(await response.text()).not.toContain(place.marker);
    }
  });
});

describe('for people whose sign-in lacks what the team requires', () => {
  it.each(guarded.filter(({ row }) => row.may !== 'operator'))('$way', async ({ way, row }) => {
    const { people, teamId } = place;
    await db.update(teams).set({ requiresSecondFactor: true }).where(eq(teams.id, teamId));
    try {
      const role = row.may === 'maker' ? 'chemist' : 'lead';
      const { outcome, text } = await ask(way, row, place, await signedIn(people[role]));
      const isOpen = row.may === 'account' || way === 'POST /(app)/account?/revoke';
      if (isOpen) expect(outcome).toBe('through');
      else expect(['required', 'forbidden']).toContain(outcome);
      if (!isOpen) expect(text).not.toContain(place.marker);
    } finally {
      await db.update(teams).set({ requiresSecondFactor: false }).where(eq(teams.id, teamId));
    }
  });
});

describe('for people whose sign-in is stale', () => {
  const hourAgo = new Date(Date.now() - 3_600_000);

  it.each(guarded)('$way', async ({ way, row }) => {
    for (const provedAt of [hourAgo, null]) {
      const at = isPost(way) ? await newPlace() : place;
      const proof = { ...byPassword(), provedAt };
      const cookie = await web.signIn(at.people.lead.userId, proof);
      const { outcome } = await ask(way, row, at, { cookie });
      if (row.fresh) expect(outcome).toBe('again');
      else expect(outcome).not.toBe('again');
    }
  });
});

describe('for programs', () => {
  const operations = ways.filter((one) => isApi(one) && one.row.scope !== undefined);

  const bearer = async (member: Member, scope: ApiScope) => ({
    authorization: `Bearer ${await apiTokens.create(member, { name: 'one', scope, days: 7 })}`,
  });

  it.each(operations)('$way', async ({ way, row }) => {
    const body = row.body ?? {};
    const send = (at: Place, headers: Record<string, string>) =>
      ask(way, { ...row, body }, at, headers);
    expect((await send(place, {})).outcome).toBe('unknown');
    expect((await send(place, { authorization: `Bearer windlass_${randomUUID()}` })).outcome).toBe(
      'unknown',
    );
    // The cookie of a browser counts for nothing here.
    expect((await send(place, await signedIn(place.people.lead))).outcome).toBe('unknown');
    for (const role of roles) {
      const expected = expectedOf(row, role);
      const isChanging = isPost(way) && !row.shared && expected.includes('through');
      const at = isChanging ? await newPlace() : place;
      const { outcome } = await send(at, await bearer(at.people[role], row.scope!));
      expect(expected, `for a ${role}: ${outcome}`).toContain(outcome);
    }
    if (row.scope !== 'read') {
      const reading = await send(place, await bearer(place.people.lead, 'read'));
      expect(reading.outcome).toBe('forbidden');
    }
    const stranger = await send(place, await bearer((await newTeam()).lead, row.scope!));
    expect(stranger.outcome).toBe(row.foreign === 'own' ? 'through' : 'missing');
    expect(stranger.text).not.toContain(place.marker);
  });

  it.each(operations)('$way where the team requires a second factor', async ({ way, row }) => {
    const headers = await bearer(place.people.lead, row.scope!);
    const isHere = eq(teams.id, place.teamId);
    await db.update(teams).set({ requiresSecondFactor: true }).where(isHere);
    try {
      const { outcome, text } = await ask(way, { ...row, body: row.body ?? {} }, place, headers);
      expect(outcome).toBe('forbidden');
      expect(text).toContain('This team requires a second factor');
    } finally {
      await db.update(teams).set({ requiresSecondFactor: false }).where(isHere);
    }
  });
});

describe('what stands elsewhere in the table', () => {
  it('letters are shown in development only', async () => {
    const way = 'GET /development/letters';
    const { outcome } = await ask(way, rows[way]!, place, await signedIn(place.people.lead));
    expect(outcome).toBe('missing');
  });

  it('a person chooses among their own teams', async () => {
    const row: Row = { may: 'reader', form: ({ teamId }) => ({ team: teamId }) };
    const way = 'POST /choose-team';
    const mine = await ask(way, row, place, await signedIn(place.people.reader));
    expect(mine.outcome).toBe('through');
    const theirs = await ask(way, row, place, await signedIn((await newTeam()).lead));
    expect(theirs.outcome).toBe('missing');
    expect((await ask(way, row, place, {})).outcome).toBe('missing');
  });

  it.each(['GET', 'POST', 'DELETE'])('%s of what the interface does not have', async (method) => {
    const response = await fetch(`${web.origin}/api/v1/nothing`, { method });
    expect(response.status).toBe(404);
    expect(response.headers.get('content-type')).toBe('application/problem+json');
  });
});
