/**
 * Sign-in with Auth.js. Its cookie is an encrypted token that only names a row of `sessions`, or of `sign_in_steps` while
 * the second factor is asked for. The row itself is read in hooks.server.ts, outside of Auth.js, which would take a
 * database that is away for a moment for a forged cookie.
 */
import { CredentialsSignin, SvelteKitAuth } from '@auth/sveltekit';
import Credentials from '@auth/sveltekit/providers/credentials';
import { isRedirect, type RequestEvent } from '@sveltejs/kit';
import { environment } from '$lib/server/environment';
import { findProvider } from '$lib/server/identity-provider';
import { log } from '$lib/server/log';
import * as sessions from '$lib/server/sessions';
import type { Begun } from '$lib/server/sign-in-steps';
import { checkGiven, RefusedProof, type SignInRefusal } from './credentials';
import { receiveIdentity } from './identity-callback';

const origin = new URL(environment.WINDLASS_ORIGIN);
const isSecure = origin.protocol === 'https:';

/** Cookies know no ports: two products on one machine must not sign each other out. */
const SESSION_COOKIE = isSecure ? '__Host-windlass' : `windlass-${origin.port || 80}`;
const PROVIDER_ID = 'sso';
/** The one endpoint of Auth.js that is open: where the identity provider sends people back to. */
export const CALLBACK_PATH = `/auth/callback/${PROVIDER_ID}`;

class RefusedSignIn extends CredentialsSignin {
  constructor(readonly refusal: SignInRefusal) {
    super();
  }
}

async function authorize(given: unknown, event: RequestEvent) {
  try {
    const begun = await checkGiven(given, event);
    return { id: begun.userId, ...begun };
  } catch (error) {
    if (!(error instanceof RefusedProof)) throw error;
    log.info({ ...error.refusal, address: event.getClientAddress() }, 'A sign-in was refused');
    throw new RefusedSignIn(error.refusal);
  }
}

/** The provider that the operator set, as OpenID Connect has it; proof key, state and nonce are all checked. */
function listProviders() {
  const provider = findProvider();
  if (!provider) return [];
  const { name, issuer, clientId, clientSecret } = provider;
  return [
    {
      id: PROVIDER_ID,
      type: 'oidc' as const,
      name,
      issuer,
      clientId,
      clientSecret,
      checks: ['pkce' as const, 'state' as const, 'nonce' as const],
    },
  ];
}

const auth = SvelteKitAuth(async (event) => ({
  secret: environment.AUTH_SECRET,
  basePath: '/auth',
  trustHost: true,
  providers: [
    Credentials({
      credentials: { kind: {}, email: {}, password: {}, confirmToken: {}, code: {} },
      authorize: (given) => authorize(given, event),
    }),
    ...listProviders(),
  ],
  session: { strategy: 'jwt', maxAge: sessions.SESSION_DAYS * 86_400 },
  pages: { signIn: '/sign-in', signOut: '/', error: '/sign-in' },
  cookies: {
    sessionToken: {
      name: SESSION_COOKIE,
      options: { httpOnly: true, sameSite: 'lax', path: '/', secure: isSecure },
    },
  },
  callbacks: {
    signIn: async ({ user, account, profile }) => {
      if (account?.provider !== PROVIDER_ID) return true;
      const present = await findPresent(event);
      const outcome = await receiveIdentity(event, { ...profile }, account.access_token, present);
      if (typeof outcome === 'string') return outcome;
      Object.assign(user, outcome);
      return true;
    },
    jwt: ({ token, user }) => (user ? namesOf(user as Partial<NamedRow>) : token),
    session: ({ session, token }) =>
      Object.assign(session, namesOf({ sessionId: token['sessionId'], stepId: token['stepId'] })),
  },
  logger: {
    // Refused sign-ins and cookies of another secret are no faults of the program; a provider that fails may be one.
    error: (error) =>
      log[error.name === 'CallbackRouteError' ? 'warn' : 'debug'](
        { error },
        'Auth.js refused something',
      ),
    warn: (code) => log.warn({ code }, 'Auth.js warns'),
    debug: () => undefined,
  },
}));

interface NamedRow {
  readonly sessionId: unknown;
  readonly stepId: unknown;
}

const textOf = (value: unknown) => (typeof value === 'string' ? value : null);

/** Which row a cookie's token names. */
const namesOf = ({ sessionId, stepId }: Partial<NamedRow>) => ({
  sessionId: textOf(sessionId),
  stepId: textOf(stepId),
});

/** Gives requests their `locals.auth`. */
export const handle = auth.handle;

/** The session, or the step, that the request's cookie names, without looking whether it has ended. */
export async function readCookie(event: RequestEvent): Promise<ReturnType<typeof namesOf>> {
  if (!event.cookies.get(SESSION_COOKIE)) return namesOf({});
  return namesOf(((await event.locals.auth()) ?? {}) as Partial<NamedRow>);
}

/** Who is signed in already when the provider sends somebody back. */
async function findPresent(event: RequestEvent) {
  const { sessionId } = await readCookie(event);
  const found = sessionId ? await sessions.find(sessionId) : null;
  return found && { userId: found.user.id, sessionId: found.sessionId, proof: found.proof };
}

export function forgetCookie(event: RequestEvent): void {
  event.cookies.delete(SESSION_COOKIE, { path: '/', secure: isSecure });
}

/** Auth.js reads a form itself, and the page's action has read the request's already. */
function asForm(event: RequestEvent, fields: Record<string, string>): RequestEvent {
  const headers = new Headers(event.request.headers);
  headers.set('content-type', 'application/x-www-form-urlencoded');
  headers.delete('content-length');
  // Where people come back to is the operator's setting, not what a request says.
  headers.set('host', origin.host);
  headers.delete('x-forwarded-host');
  headers.delete('x-forwarded-proto');
  const body = new URLSearchParams(fields);
  const request = new Request(new URL(event.url.pathname, origin), {
    method: 'POST',
    headers,
    body,
  });
  return { ...event, request, url: new URL(event.url.pathname, origin) };
}

/** Signs in with what a form gave and sets the cookie; answers why not, or null when it worked. */
export async function tryToSignIn(
  event: RequestEvent,
  given:
    | { kind?: 'password'; email: string; password: string; confirmToken?: string }
    | { kind: 'code'; code: string }
    | { kind: 'again'; password: string; code: string },
): Promise<SignInRefusal | null> {
  const fields = { kind: 'password', ...given, providerId: 'credentials', redirectTo: '/' };
  try {
    await auth.signIn(asForm(event, fields));
  } catch (error) {
    if (error instanceof RefusedSignIn) return error.refusal;
    if (!isRedirect(error)) throw error;
  }
  return null;
}

/**
 * The address at the identity provider where the person signs in, to come back to a path here; null when it does not
 * answer. With `isAgain` it must ask for the credentials even of who is signed in there.
 */
export async function findProviderUrl(
  event: RequestEvent,
  returnTo: string,
  isAgain: boolean,
): Promise<string | null> {
  const again = { 'authorizationParams-prompt': 'login', 'authorizationParams-max_age': '0' };
  const fields = { providerId: PROVIDER_ID, redirectTo: returnTo, ...(isAgain ? again : {}) };
  try {
    await auth.signIn(asForm(event, fields));
  } catch (error) {
    if (isRedirect(error)) return error.location;
    log.warn({ error }, 'The identity provider does not answer');
  }
  return null;
}

/** Ends the request's sign-in. */
export async function endSignIn(event: RequestEvent): Promise<void> {
  const { user, sessionId } = event.locals;
  if (user && sessionId) await sessions.revoke(user.id, sessionId);
  forgetCookie(event);
}

export type { Begun, SignInRefusal };
