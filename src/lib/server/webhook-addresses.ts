/**
 * Which addresses webhooks may be sent to. A name is looked up once, every address it has is judged, and the connection
 * goes to the judged ones only: a name server that answers otherwise a moment later changes nothing.
 */
import { lookup } from 'node:dns/promises';
import ipaddr from 'ipaddr.js';
import { environment } from './environment';

/** Finds the IP addresses of a host. */
export type Resolve = (host: string) => Promise<readonly string[]>;

/** An address that may not be used, in a sentence for people. */
export class AddressRefused extends Error {}

const LOOKUP_MS = 5_000;
/** Only these are given out to hosts of the public Internet (RFC 4291, IANA); what is outside needs the operator's word. */
const PUBLIC_IPV6 = ipaddr.parseCIDR('2000::/3');

/** The system's own way of looking names up. */
export const resolveBySystem: Resolve = async (host) =>
  (await lookup(host, { all: true, verbatim: true })).map(({ address }) => address);

function isAllowedByOperator(address: ipaddr.IPv4 | ipaddr.IPv6): boolean {
  return environment.WINDLASS_WEBHOOK_NETWORKS.some(
    (network) => network[0].kind() === address.kind() && address.match(network),
  );
}

/** True for an address of the public Internet, or of a network that the operator allows. */
export function mayReach(text: string): boolean {
  if (!ipaddr.isValid(text)) return false;
  const address = ipaddr.parse(text);
  if (isAllowedByOperator(address)) return true;
  if (address.range() !== 'unicast') return false;
  return address.kind() === 'ipv4' || address.match(PUBLIC_IPV6);
}

async function lookUp(host: string, resolve: Resolve): Promise<readonly string[]> {
  let timer: NodeJS.Timeout | undefined;
  const tooLate = new Promise<never>((_, reject) => {
    timer = setTimeout(() => reject(new Error('too late')), LOOKUP_MS);
  });
  try {
    return await Promise.race([resolve(host), tooLate]);
  } catch {
    throw new AddressRefused(`The name ${host} cannot be looked up. Check the address.`);
  } finally {
    clearTimeout(timer);
  }
}

/** The IP addresses to connect to for a webhook's address; throws AddressRefused where it may not be used. */
export async function checkAddress(
  url: string,
  resolve: Resolve = resolveBySystem,
): Promise<readonly string[]> {
  const { protocol, username, password, hostname } = new URL(url);
  if (protocol !== 'https:' && !(protocol === 'http:' && environment.WINDLASS_WEBHOOK_HTTP)) {
    throw new AddressRefused('Use an address that begins with https://.');
  }
  if (username !== '' || password !== '') {
    throw new AddressRefused('Leave user name and password out of the address.');
  }
  const host = hostname.replace(/^\[|\]$/g, '');
  const addresses = ipaddr.isValid(host) ? [host] : await lookUp(host, resolve);
  if (addresses.length === 0) {
    throw new AddressRefused(`The name ${host} has no address. Check the spelling.`);
  }
  if (!addresses.every(mayReach)) {
    throw new AddressRefused(
      `${host} leads to a private or reserved network, which webhooks do not reach. The operator can allow networks.`,
    );
  }
  return addresses;
}
