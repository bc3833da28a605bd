/** The OpenID Connect provider of this server, as far as Auth.js does not ask it itself. */
import { z } from 'zod';
import { environment } from './environment';
import { log } from './log';

const PATIENCE_MS = 5_000;
const KEPT_MS = 600_000;

const discoverySchema = z.object({
  userinfo_endpoint: z.url().optional(),
  end_session_endpoint: z.url().optional(),
});
type Discovery = z.output<typeof discoverySchema>;

let kept: { readonly at: number; readonly found: Discovery } | null = null;

/** The provider's name and settings; null where the operator set none. */
export function findProvider() {
  const {
    WINDLASS_OIDC_ISSUER: issuer,
    WINDLASS_OIDC_CLIENT_ID: clientId,
    WINDLASS_OIDC_CLIENT_SECRET: clientSecret,
    WINDLASS_OIDC_NAME: name,
  } = environment;
  if (!issuer || !clientId || !clientSecret) return null;
  return { issuer, clientId, clientSecret, name };
}

async function readJson(url: string, headers: Record<string, string> = {}): Promise<unknown> {
  // Nothing but the provider's own answer is wanted: a redirect could lead into the network behind this server.
  const response = await fetch(url, {
    headers: { accept: 'application/json', ...headers },
    redirect: 'error',
    signal: AbortSignal.timeout(PATIENCE_MS),
  });
  if (!response.ok) throw new Error(`The identity provider answered ${response.status}.`);
  return response.json();
}

async function discover(issuer: string): Promise<Discovery> {
  if (kept && Date.now() - kept.at < KEPT_MS) return kept.found;
  const url = `${issuer.replace(/\/$/, '')}/.well-known/openid-configuration`;
  const found = discoverySchema.parse(await readJson(url));
  kept = { at: Date.now(), found };
  return found;
}

/** Where the person can end their sign-in at the provider as well; null when it offers no such place or is away. */
export async function findSignOutUrl(returnTo: string): Promise<string | null> {
  const provider = findProvider();
  if (!provider) return null;
  try {
    const { end_session_endpoint: endpoint } = await discover(provider.issuer);
    if (!endpoint) return null;
    const url = new URL(endpoint);
    url.searchParams.set('client_id', provider.clientId);
    url.searchParams.set('post_logout_redirect_uri', returnTo);
    return url.href;
  } catch (error) {
    log.warn({ error }, 'The identity provider does not answer');
    return null;
  }
}

/** Claims that some providers tell only here and not in the ID token; what is about another subject is not taken. */
export async function readUserInfo(
  accessToken: string,
  subject: string,
): Promise<Record<string, unknown>> {
  const provider = findProvider();
  if (!provider) return {};
  const { userinfo_endpoint: endpoint } = await discover(provider.issuer);
  if (!endpoint) return {};
  const told = z
    .looseObject({ sub: z.string() })
    .parse(await readJson(endpoint, { authorization: `Bearer ${accessToken}` }));
  return told.sub === subject ? told : {};
}
