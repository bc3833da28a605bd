/** What happens to every request: the right address, who asks, who may enter, headers, and an id for surprises. */
import {
  error,
  isHttpError,
  isRedirect,
  redirect,
  type Handle,
  type HandleServerError,
  type RequestEvent,
  type ServerInit,
} from '@sveltejs/kit';
import { sequence } from '@sveltejs/kit/hooks';
import { building } from '$app/environment';
import { findMissing } from '$lib/domain/sign-in-strength';
import { registerChemistryResources } from '$lib/server/chemistry-resources';
import { closeDatabase } from '$lib/server/db';
import { environment } from '$lib/server/environment';
import { keepHouse } from '$lib/server/housekeeping';
import { log } from '$lib/server/log';
import { closeMail } from '$lib/server/mail';
import { countRequest, watchProcess } from '$lib/server/metrics';
import { stopQueue } from '$lib/server/queue';
import { addHeaders } from '$lib/server/response-headers';
import * as sessions from '$lib/server/sessions';
import { chooseMembership, TEAM_COOKIE } from '$lib/server/teams';
import { sayWhatIsMissing } from '$lib/server/team-requirements';
import { CALLBACK_PATH, forgetCookie, handle as handleAuth, readCookie } from './auth';

const origin = new URL(environment.WINDLASS_ORIGIN);
const LOOPBACK = ['localhost', '127.0.0.1', '[::1]'];
/** Asked by machines, also while the database is away. */
const PROBES = ['/healthz', '/readyz', '/metrics'];

export const init: ServerInit = () => {
  if (building) return;
  registerChemistryResources();
  watchProcess();
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

/** A redirect that a guard below threw, as an answer: thrown any further, it would leave without the headers. */
function asAnswer(cause: unknown, { request, isDataRequest }: RequestEvent): Response {
  // Pages with script get it in words of their own, which SvelteKit writes.
  const isScripted = isDataRequest || request.headers.has('x-sveltekit-action');
  if (!isRedirect(cause) || isScripted) throw cause;
  return new Response(null, { status: cause.status, headers: { location: cause.location } });
}

const finishResponse: Handle = async ({ event, resolve }) => {
  const startedAt = performance.now();
  const { method } = event.request;
  const count = (status: number) => {
    const milliseconds = Math.round(performance.now() - startedAt);
    countRequest({ method, route: event.route.id, status, milliseconds });
    return milliseconds;
  };
  const response = await Promise.resolve(resolve(event)).catch((cause: unknown) => {
    try {
      return asAnswer(cause, event);
    } catch (thrown) {
      // The guards below end a request by throwing.
      count(isRedirect(thrown) || isHttpError(thrown) ? thrown.status : 500);
      throw thrown;
    }
  });
  addHeaders(response, Boolean(event.locals.user));
  const { status } = response;
  const line = { method, path: event.url.pathname, status, milliseconds: count(status) };
  // Who tries what they may not shall be found later.
  if (status === 403) log.info({ ...line, userId: event.locals.user?.id }, 'refused');
  else log.debug(line, 'answered');
  return response;
};

/** Auth.js brings endpoints of its own; the forms here call it directly, so only the way back from a provider is open. */
const closeAuthEndpoints: Handle = async ({ event, resolve }) => {
  const { pathname } = event.url;
  if (!pathname.startsWith('/auth/')) return resolve(event);
  if (pathname !== CALLBACK_PATH || event.request.method !== 'GET') {
    error(404, 'There is no page at this address.');
  }
  // Auth.js answers a failure by a redirect whose headers cannot be added to; its copy's can.
  const response = await resolve(event);
  return new Response(response.body, response);
};

async function identify(event: RequestEvent): Promise<void> {
  const { sessionId, stepId } = await readCookie(event);
  const signedIn = sessionId ? await sessions.find(sessionId) : null;
  if (sessionId && !signedIn) forgetCookie(event);
  const address = event.getClientAddress();
  const memberships = (signedIn?.memberships ?? []).map((one) => ({ ...one, address }));
  const chosen = chooseMembership(memberships, event.cookies.get(TEAM_COOKIE));
  const missing = chosen && signedIn ? findMissing(chosen.requires, signedIn.proof) : null;
  event.locals.user = signedIn?.user ?? null;
  event.locals.sessionId = signedIn?.sessionId ?? null;
  event.locals.stepId = stepId;
  event.locals.proof = signedIn?.proof ?? null;
  event.locals.memberships = memberships;
  event.locals.barred = chosen && missing ? { membership: chosen, missing } : null;
  event.locals.membership = missing ? null : chosen;
}

/** Programs come with a token of their own and are never taken for the person whose browser sends a cookie. */
const isForPrograms = ({ url }: RequestEvent) => url.pathname.startsWith('/api/');

const identifyPerson: Handle = async ({ event, resolve }) => {
  if (PROBES.includes(event.url.pathname) || isForPrograms(event)) event.locals.user = null;
  else await identify(event);
  return resolve(event);
};

/** What people need for becoming able to see a team's data again, or for looking at their own account. */
const OPEN_TO_BARRED = [
  '/(app)/account',
  '/(app)/account/second-factor',
  '/(app)/again',
  '/(app)/required',
  '/(app)/reading',
];

/** Whose sign-in lacks what the chosen team requires is led to the page that says how to mend it. */
const leadBarred: Handle = ({ event, resolve }) => {
  const route = event.route.id ?? '';
  const isOpen = OPEN_TO_BARRED.includes(route);
  if (!event.locals.barred || !route.startsWith('/(app)') || isOpen) return resolve(event);
  const isPage = event.isDataRequest || event.request.headers.get('accept')?.includes('text/html');
  // Programs of a page that asked for data are told; see `whoAsks`.
  if (!isPage || event.request.method !== 'GET')
    error(403, sayWhatIsMissing(event.locals.barred.missing));
  redirect(303, `/required?next=${encodeURIComponent(event.url.pathname + event.url.search)}`);
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
  leadBarred,
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
