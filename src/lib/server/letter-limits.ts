/** How often letters may be asked for. */
import { clientNetwork, limitRate } from './rate-limits';

/** Seconds to wait before another letter to the address may be asked for; null when one may go. */
export function limitLetters(
  event: { getClientAddress: () => string },
  email: string,
): Promise<number | null> {
  return limitRate(
    ['letter to an address', email],
    ['letter from a client', clientNetwork(event.getClientAddress())],
  );
}

/** Seconds to wait before another letter's link may be tried; null when one may. */
export function limitTries(event: { getClientAddress: () => string }): Promise<number | null> {
  return limitRate(['try a letter from a client', clientNetwork(event.getClientAddress())]);
}
