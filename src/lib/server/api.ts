/** Carries out the operations of the REST interface: token, scope, limits, checks, and answers as they are promised. */
import { error, isHttpError, type RequestEvent } from '@sveltejs/kit';
import { createHash } from 'node:crypto';
import { z } from 'zod';
import type { Operation, Problem } from '../domain/api';
import { uuidParam } from '../domain/identifiers';
import { findBearer, type Bearer } from './api-tokens';
import { log } from './log';
import { sayWhatTokenMisses } from './team-requirements';
import type { Membership } from './teams';
import { clientNetwork, limitRate, takeFrom } from './rate-limits';
import { LimitError } from './refusals';

const titles: Record<number, string> = {
  400: 'The request is wrong',
  401: 'No valid token',
  403: 'Not allowed',
  404: 'Not found',
  405: 'Not this way',
  409: 'In conflict',
  413: 'Too large',
  422: 'Cannot be carried out',
  429: 'Too many requests',
  500: 'Something went wrong on our side',
};

/** Largest body of a request, bytes. */
const BODY_LIMIT = 50 * 1024 * 1024;

/** An error answer after RFC 9457. */
export function problemResponse(
  status: number,
  detail: string,
  more: { readonly errors?: Problem['errors']; readonly headers?: Record<string, string> } = {},
): Response {
  const problem: Problem = {
    type: 'about:blank',
    title: titles[status] ?? 'Error',
    status,
    detail,
    ...(more.errors ? { errors: more.errors } : {}),
  };
  return new Response(JSON.stringify(problem), {
    status,
    headers: { 'content-type': 'application/problem+json', ...more.headers },
  });
}

/** Raised for a request whose fields are wrong. */
class BadRequest extends Error {
  constructor(readonly errors: NonNullable<Problem['errors']>) {
    super('Some fields of the request are wrong.');
  }
}

function check<S extends z.ZodType>(schema: S, value: unknown): z.output<S> {
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  throw new BadRequest(
    parsed.error.issues.map(({ path, message }) => ({
      pointer: `/${path.map(String).join('/')}`,
      detail: message,
    })),
  );
}

async function readBody(request: Request): Promise<string> {
  const length = Number(request.headers.get('content-length') ?? 0);
  if (length > BODY_LIMIT) error(413, `A request may have at most ${BODY_LIMIT / 1024 / 1024} MB.`);
  return request.text();
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    error(400, 'The body is not JSON.');
  }
}

/** The token's person, or an error answer; wrong tokens are counted against the client that tries them. */
async function identify(event: RequestEvent): Promise<Bearer> {
  const address = event.getClientAddress();
  const token = /^Bearer (\S+)$/i.exec(event.request.headers.get('authorization') ?? '')?.[1];
  const bearer = token === undefined ? null : await findBearer(token, address);
  if (bearer?.missing) error(403, sayWhatTokenMisses(bearer.missing));
  if (bearer) return bearer;
  const wait = await limitRate(['wrong token from a client', clientNetwork(address)]);
  if (wait !== null) error(429, `Too many wrong tokens. Wait ${wait} seconds.`);
  error(401, 'Send a token: Authorization: Bearer … . Your account page makes one.');
}

type Output<S> = S extends z.ZodType ? z.output<S> : undefined;

export interface Asked<O extends Operation> {
  readonly member: Membership;
  readonly scopes: Bearer['scopes'];
  readonly event: RequestEvent;
  /** A parameter of the path that is an id; a malformed one is one that no row has. */
  readonly id: (name: string) => string;
  readonly query: Output<O['query']>;
  readonly body: Output<O['body']>;
  /** The body as it came, for telling whether two requests are the same. */
  readonly text: string;
}

type Answer<O extends Operation> = O['answer'] extends z.ZodType
  ? z.input<O['answer']> | Response
  : Response;

/** Makes a route handler of an operation. */
export function serve<const O extends Operation>(
  operation: O,
  carryOut: (asked: Asked<O>) => Promise<Answer<O>>,
): (event: RequestEvent) => Promise<Response> {
  return async (event) => {
    const limits: Record<string, string> = {};
    try {
      const { member, scopes } = await identify(event);
      Object.assign(limits, await countRequest(member));
      if (!scopes.includes(operation.scope)) {
        error(403, `This token may not do that; it needs the scope "${operation.scope}".`);
      }
      const text = operation.body ? await readBody(event.request) : '';
      const answer = await carryOut({
        member,
        scopes,
        event,
        id: (name) => uuidParam((event.params as Record<string, string>)[name] ?? ''),
        query: (operation.query
          ? check(operation.query, Object.fromEntries(event.url.searchParams))
          : undefined) as Output<O['query']>,
        body: (operation.body ? check(operation.body, parseJson(text)) : undefined) as Output<
          O['body']
        >,
        text,
      });
      const response = answer instanceof Response ? answer : jsonResponse(operation, event, answer);
      for (const [name, value] of Object.entries(limits)) response.headers.set(name, value);
      return response;
    } catch (cause) {
      return asProblem(cause, event, limits);
    }
  };
}

function asProblem(cause: unknown, event: RequestEvent, headers: Record<string, string>): Response {
  if (cause instanceof BadRequest) {
    return problemResponse(400, cause.message, { errors: cause.errors, headers });
  }
  if (cause instanceof LimitError) {
    return problemResponse(cause.status, cause.message, { headers });
  }
  if (isHttpError(cause)) {
    const wait = /Wait (\d+) seconds/.exec(cause.body.message)?.[1];
    const more: Record<string, string> = {};
    if (cause.status === 401) more['www-authenticate'] = 'Bearer';
    if (cause.status === 429 && wait) more['retry-after'] = wait;
    return problemResponse(cause.status, cause.body.message, { headers: { ...headers, ...more } });
  }
  log.error({ error: cause, path: event.url.pathname }, 'Nobody foresaw this');
  return problemResponse(500, 'It has been written down. Try again later.', { headers });
}

/** Counts a request of a member; answers the headers of draft-ietf-httpapi-ratelimit-headers. */
async function countRequest(member: Membership): Promise<Record<string, string>> {
  const { capacity, left, wait } = await takeFrom(['ask the interface as a member', member.userId]);
  if (wait !== null) error(429, `That was a lot of requests. Wait ${wait} seconds.`);
  return {
    'ratelimit-policy': `"member";q=${capacity};w=60`,
    ratelimit: `"member";r=${Math.floor(left)};t=60`,
  };
}

/** JSON, with an ETag for what is only read; 304 where the asker has it already. */
function jsonResponse(operation: Operation, event: RequestEvent, answer: unknown): Response {
  const body = JSON.stringify(answer);
  if (operation.method === 'post') {
    return new Response(body, {
      status: operation.body ? 201 : 200,
      headers: { 'content-type': 'application/json', 'cache-control': 'no-store' },
    });
  }
  const etag = `"${createHash('sha256').update(body).digest('base64url').slice(0, 27)}"`;
  const known = event.request.headers.get('if-none-match')?.split(/\s*,\s*/) ?? [];
  const headers = { etag, 'cache-control': 'private, no-cache', vary: 'authorization' };
  if (known.includes(etag) || known.includes('*'))
    return new Response(null, { status: 304, headers });
  return new Response(body, { headers: { ...headers, 'content-type': 'application/json' } });
}

const cursorSchema = z.tuple([z.string(), z.string()]);

/** A cursor as text that nobody has to understand. */
export function writeCursor(sortedBy: string, id: string): string {
  return Buffer.from(JSON.stringify([sortedBy, id])).toString('base64url');
}

/** The place a cursor names; null for the beginning. Throws 400 for what is no cursor. */
export function readCursor(cursor: string | undefined): readonly [string, string] | null {
  if (cursor === undefined) return null;
  try {
    return cursorSchema.parse(JSON.parse(Buffer.from(cursor, 'base64url').toString()));
  } catch {
    error(400, 'This is no cursor of ours; take `next` of the page before.');
  }
}
