/**
 * Sign-in with Auth.js. Its cookie is an encrypted token that only names a row of `sessions`. The row itself is read in
 * hooks.server.ts, outside of Auth.js, which would take a database that is away for a moment for a forged cookie.
 */
import { CredentialsSignin, SvelteKitAuth } from '@auth/sveltekit';
import Credentials from '@auth/sveltekit/providers/credentials';
import { isRedirect, type RequestEvent } from '@sveltejs/kit';
import { confirmAndSignInSchema, signInSchema } from '$lib/domain/accounts';
import { environment } from '$lib/server/environment';
import { log } from '$lib/server/log';
import { clientNetwork, limitRate } from '$lib/server/rate-limits';
import * as sessions from '$lib/server/sessions';
import * as users from '$lib/server/users';

const origin = new URL(environment.WINDLASS_ORIGIN);
const isSecure = origin.protocol === 'https:';

/** Cookies know no ports: two products on one machine must not sign each other out. */
const SESSION_COOKIE = isSecure ? '__Host-windlass' : `windlass-${origin.port || 80}`;

/** Why nobody was signed in: a fault of what was given, or too many tries. */
export type SignInRefusal = { readonly fault: users.SignInFault } | { readonly wait: number };

class RefusedSignIn extends CredentialsSignin {
  constructor(readonly refusal: SignInRefusal) {
    super();
  }
}

async function authorize(given: unknown, event: RequestEvent) {
  const isConfirming = typeof given === 'object' && given !== null && 'confirmToken' in given;
  const parsed = (isConfirming ? confirmAndSignInSchema : signInSchema).safeParse(given);
  if (!parsed.success) throw new RefusedSignIn({ fault: 'wrong' });
  const address = event.getClientAddress();
  const wait = await limitRate(
    ['sign in to an address', parsed.data.email],
    ['sign in from a client', clientNetwork(address)],
  );
  if (wait !== null) throw new RefusedSignIn({ wait });
  const userAgent = event.request.headers.get('user-agent') ?? '';
  const outcome = await users.signIn(parsed.data, { address, userAgent });
  if ('fault' in outcome) throw new RefusedSignIn(outcome);
  return { id: outcome.userId, sessionId: outcome.sessionId };
}

const auth = SvelteKitAuth(async (event) => ({
  secret: environment.AUTH_SECRET,
  basePath: '/auth',
  trustHost: true,
  providers: [
    Credentials({
      credentials: { email: {}, password: {}, confirmToken: {} },
      authorize: (given) => authorize(given, event),
    }),
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
    jwt: ({ token, user }) =>
      user ? { sessionId: (user as { sessionId?: string }).sessionId } : token,
    session: ({ session, token }) => Object.assign(session, { sessionId: token.sessionId }),
  },
  logger: {
    // Refused sign-ins and cookies of another secret are no faults of the program.
    error: (error) => log.debug({ error }, 'Auth.js refused something'),
    warn: (code) => log.warn({ code }, 'Auth.js warns'),
    debug: () => undefined,
  },
}));

/** Gives requests their `locals.auth`. */
export const handle = auth.handle;

/** The session that the request's cookie names, without looking whether it has ended. */
export async function readSessionId(event: RequestEvent): Promise<string | null> {
  if (!event.cookies.get(SESSION_COOKIE)) return null;
  const session = (await event.locals.auth()) as { sessionId?: unknown } | null;
  return typeof session?.sessionId === 'string' ? session.sessionId : null;
}

export function forgetCookie(event: RequestEvent): void {
  event.cookies.delete(SESSION_COOKIE, { path: '/', secure: isSecure });
}

/** Signs in with what a form gave and sets the cookie; answers why not, or null when it worked. */
export async function tryToSignIn(
  event: RequestEvent,
  given: { email: string; password: string; confirmToken?: string },
): Promise<SignInRefusal | null> {
  const form = new URLSearchParams({ ...given, providerId: 'credentials', redirectTo: '/' });
  const headers = new Headers(event.request.headers);
  headers.set('content-type', 'application/x-www-form-urlencoded');
  headers.delete('content-length');
  // Auth.js reads the form itself, and the page's action has read the request's already.
  const request = new Request(event.url, { method: 'POST', headers, body: form });
  try {
    await auth.signIn({ ...event, request });
  } catch (error) {
    if (error instanceof RefusedSignIn) return error.refusal;
    if (!isRedirect(error)) throw error;
  }
  return null;
}

/** Ends the request's sign-in. */
export async function endSignIn(event: RequestEvent): Promise<void> {
  const { user, sessionId } = event.locals;
  if (user && sessionId) await sessions.revoke(user.id, sessionId);
  forgetCookie(event);
}
