/** What happens when the identity provider sends somebody back. */
import type { RequestEvent } from '@sveltejs/kit';
import { identityClaimsSchema } from '$lib/domain/identity-claims';
import * as identities from '$lib/server/identities';
import { readUserInfo } from '$lib/server/identity-provider';
import type { Begun } from '$lib/server/sign-in-steps';
import type { Proof } from '$lib/server/sessions';

/**
 * Finds or opens the account of who comes back.
 * @returns what was begun, or the path of the page that says why nothing was
 */
export async function receiveIdentity(
  event: RequestEvent,
  idToken: Record<string, unknown>,
  accessToken: string | undefined,
  present: { readonly userId: string; readonly sessionId: string; readonly proof: Proof } | null,
): Promise<Begun | string> {
  const claims = identityClaimsSchema.parse(await complete(idToken, accessToken));
  const client = {
    address: event.getClientAddress(),
    userAgent: event.request.headers.get('user-agent') ?? '',
  };
  const outcome = await identities.signIn(claims, client, present);
  if (!('fault' in outcome)) return outcome;
  const fault = encodeURIComponent(outcome.fault);
  return present ? `/again?fault=${fault}` : `/sign-in?fault=${fault}`;
}

/** Some providers tell addresses only on being asked; what the signed token says goes first. */
async function complete(
  idToken: Record<string, unknown>,
  accessToken: string | undefined,
): Promise<Record<string, unknown>> {
  if ('email' in idToken || !accessToken) return idToken;
  return { ...(await readUserInfo(accessToken, String(idToken['sub']))), ...idToken };
}
