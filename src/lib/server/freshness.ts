/** Dangerous acts ask once more who is there: a sign-in is fresh for ten minutes after the last proof. */
import { redirect, type RequestEvent } from '@sveltejs/kit';

export const FRESH_MINUTES = 10;

/** True when the person proved a short while ago who they are. */
export function isFresh({ proof }: App.Locals): boolean {
  if (!proof?.provedAt) return false;
  return Date.now() - proof.provedAt.getTime() < FRESH_MINUTES * 60_000;
}

/**
 * First line of every dangerous action: leads to the page that asks who is there when the sign-in is stale, and from
 * there back to `back`, by default the page of the form. What was filled in can be carried in `back`'s query.
 */
export function requireFresh(
  event: Pick<RequestEvent, 'locals' | 'url'>,
  back: string = event.url.pathname,
): void {
  if (isFresh(event.locals)) return;
  redirect(303, `/again?next=${encodeURIComponent(back)}`);
}
