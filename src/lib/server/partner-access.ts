/** How a request with a partner's link gets in: the link in the address, and the proof of its password in a cookie. */
import { error, type RequestEvent } from '@sveltejs/kit';
import { describeWait } from '../domain/waiting';
import { environment } from './environment';
import * as partnerLinks from './partner-links';
import { clientNetwork, limitRate } from './rate-limits';

/** Bound to the link's own address, which the prefix `__Host-` does not allow. */
const PROOF_COOKIE = `${environment.WINDLASS_ORIGIN.startsWith('https:') ? '__Secure-' : ''}windlass-partner`;
const PROOF_SECONDS = 3600;

type LinkEvent = Pick<RequestEvent, 'getClientAddress' | 'cookies' | 'url'> & {
  params: { token: string };
};

/** The link of the address and whether its password, if it has one, was given. Throws 404 when it does not work. */
export async function openLink(event: LinkEvent) {
  const network = clientNetwork(event.getClientAddress());
  const wait = await limitRate(['open a partner link from a client', network]);
  if (wait !== null) error(429, `Too many tries. Wait ${describeWait(wait)}, then try again.`);
  const link = await partnerLinks.find(event.params.token);
  if (!link) {
    error(404, 'This link does not work: it has ended, or was taken back. Ask for another one.');
  }
  return { link, isUnlocked: partnerLinks.isUnlocked(link, event.cookies.get(PROOF_COOKIE)) };
}

/** Keeps the proof of a password for this link's pages alone, for an hour. */
export function keepProof(event: LinkEvent, proof: string): void {
  event.cookies.set(PROOF_COOKIE, proof, {
    path: `/shared/${event.params.token}`,
    maxAge: PROOF_SECONDS,
    secure: event.url.protocol === 'https:',
  });
}
