/** Who may read the metrics: whoever sends the token; without a token, this machine only. */
import { timingSafeEqual } from 'node:crypto';
import ipaddr from 'ipaddr.js';
import { environment } from './environment';
import { hashSecret } from './secrets';

/** Headers by which a proxy tells that it asks for somebody else, who then is not on this machine. */
const FORWARDED = ['forwarded', 'x-forwarded-for', 'x-real-ip'];

function isLoopback(address: string): boolean {
  return ipaddr.isValid(address) && ipaddr.process(address).range() === 'loopback';
}

/** True where the request may read the metrics; `address` is the client's. */
export function mayReadMetrics(
  headers: Headers,
  address: string,
  token: string | undefined = environment.WINDLASS_METRICS_TOKEN,
): boolean {
  if (token === undefined) {
    return isLoopback(address) && !FORWARDED.some((name) => headers.has(name));
  }
  const sent = /^Bearer (\S+)$/i.exec(headers.get('authorization') ?? '')?.[1] ?? '';
  // Hashes have one length, which comparing in constant time needs.
  return timingSafeEqual(Buffer.from(hashSecret(sent)), Buffer.from(hashSecret(token)));
}
