/** What happens to every request: the right address, who asks, who may enter, headers, and an id for surprises. */
import {
  error,
  redirect,
  type Handle,
  type HandleServerError,
  type RequestEvent,
  type ServerInit,
} from '@sveltejs/kit';
import { sequence } from '@sveltejs/kit/hooks';
import { building } from '$app/environment';
import { registerChemistryResources } from '$lib/server/chemistry-resources';
import { closeDatabase } from '$lib/server/db';
import { environment } from '$lib/server/environment';
import { keepHouse } from '$lib/server/housekeeping';
import { log } from '$lib/server/log';
import { closeMail } from '$lib/server/mail';
import { stopQueue } from '$lib/server/queue';
import { addHeaders } from '$lib/server/response-headers';
import * as sessions from '$lib/server/sessions';
import { chooseMembership, TEAM_COOKIE } from '$lib/server/teams';
import { forgetCookie, handle as handleAuth, readSessionId } from './auth';

const origin = new URL(environment.WINDLASS_ORIGIN);
const LOOPBACK = ['localhost', '127.0.0.1', '[::1]'];
/** Asked by machines, also while the database is away. */
const PROBES = ['/healthz', '/readyz'];

export const init: ServerInit = () => {
  if (building) return;
  registerChemistryResources();
  keepHouse();
  // Open sockets would keep the process from ending.
  process.once('sveltekit:shutdown', () => {
    // Letters go into the queue, so it stays open for them.
    void closeMail().then(stopQueue).finally(closeDatabase);
  });
};

/** On one's own machine localhost and 127.0.0.1 are the same, but not to cookies and forms: one of them is used. */
const settleAddress: Handle = ({ event, resolve }) => {
  const host = event.request.headers.get('host') ?? '';
  const isAlias =
    host !== origin.host &&
    LOOPBACK.includes(origin.hostname) &&
    LOOPBACK.some((name) => host === `${name}:${origin.port}`);
  if (isAlias && event.request.method === 'GET' && !PROBES.includes(event.url.pathname)) {
    redirect(307, `${origin.origin}${event.url.pathname}${event.url.search}`);
  }
  return resolve(event);
};

const finishResponse: Handle = async ({ event, resolve }) => {
  const startedAt = performance.now();
  const response = await resolve(event);
  addHeaders(response, event.locals.user !== null);
  const { method } = event.request;
  const milliseconds = Math.round(performance.now() - startedAt);
  log.debug(
    { method, path: event.url.pathname, status: response.status, milliseconds },
    'answered',
  );
  return response;
};

/** Auth.js brings endpoints of its own; the forms here call it directly, so none of them has to be open. */
const closeAuthEndpoints: Handle = ({ event, resolve }) => {
  if (event.url.pathname.startsWith('/auth/')) error(404, 'There is no page at this address.');
  return resolve(event);
};

async function identify(event: RequestEvent): Promise<void> {
  const sessionId = await readSessionId(event);
  const signedIn = sessionId ? await sessions.find(sessionId) : null;
  if (sessionId && !signedIn) forgetCookie(event);
  const address = event.getClientAddress();
  const memberships = (signedIn?.memberships ?? []).map((one) => ({ ...one, address }));
  event.locals.user = signedIn?.user ?? null;
  event.locals.sessionId = signedIn?.sessionId ?? null;
  event.locals.memberships = memberships;
  event.locals.membership = chooseMembership(memberships, event.cookies.get(TEAM_COOKIE));
}

/** Programs come with a token of their own and are never taken for the person whose browser sends a cookie. */
const isForPrograms = ({ url }: RequestEvent) => url.pathname.startsWith('/api/');

const identifyPerson: Handle = async ({ event, resolve }) => {
  if (PROBES.includes(event.url.pathname) || isForPrograms(event)) event.locals.user = null;
  else await identify(event);
  return resolve(event);
};

/** The groups of routes carry the rule of who may enter. */
const guardRoutes: Handle = ({ event, resolve }) => {
  const route = event.route.id ?? '';
  if (event.locals.user) return resolve(event);
  if (route.startsWith('/(app)')) {
    const next = event.request.method === 'GET' ? event.url.pathname + event.url.search : '/desk';
    redirect(303, `/sign-in?next=${encodeURIComponent(next)}`);
  }
  return resolve(event);
};

export const handle = sequence(
  settleAddress,
  finishResponse,
  closeAuthEndpoints,
  handleAuth,
  identifyPerson,
  guardRoutes,
);

export const handleError: HandleServerError = ({ error: cause, event, status, message }) => {
  if (status === 404) return { message: 'There is no page at this address.' };
  if (status < 500) return { message };
  const errorId = crypto.randomUUID().slice(0, 8);
  const { method } = event.request;
  log.error({ error: cause, errorId, method, path: event.url.pathname }, 'Nobody foresaw this');
  return {
    message: 'Something went wrong on our side, not on yours. It has been written down.',
    errorId,
  };
};
