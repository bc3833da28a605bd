/** One signed request to a webhook's address. */
import { createHmac } from 'node:crypto';
import { request as requestHttp, type ClientRequest, type IncomingMessage } from 'node:http';
import { request as requestHttps } from 'node:https';
import { isIPv6, type LookupFunction } from 'node:net';
import { webhookHeaders, type WebhookEvent } from '../domain/webhooks';
import { AddressRefused, checkAddress, type Resolve } from './webhook-addresses';

/** Longest time of an attempt, from the first packet to the end of the answer. */
const PATIENCE_MS = 10_000;
/** So much of an answer is read; the rest is cut off. */
const LONGEST_ANSWER = 16 * 1024;

export interface WebhookMessage {
  readonly url: string;
  readonly event: WebhookEvent;
  readonly delivery: string;
  readonly body: string;
  /** Everything that signs: the present secret first. */
  readonly secrets: readonly string[];
}

/** How an attempt went: `reason` is empty where the message was taken. */
export interface Attempt {
  readonly status: number | null;
  readonly reason: string;
  readonly milliseconds: number;
}

/** `v1=` and the hex HMAC-SHA256 of "timestamp.body" for each secret, separated by commas. */
export function signatureOf(secrets: readonly string[], timestamp: number, body: string): string {
  return secrets
    .map((secret) => createHmac('sha256', secret).update(`${timestamp}.${body}`).digest('hex'))
    .map((digest) => `v1=${digest}`)
    .join(',');
}

/** Sends the message and says how that went; never throws. */
export async function sendMessage(message: WebhookMessage, resolve?: Resolve): Promise<Attempt> {
  const began = performance.now();
  const end = (status: number | null, reason: string): Attempt => ({
    status,
    reason,
    milliseconds: Math.round(performance.now() - began),
  });
  try {
    const addresses = await checkAddress(message.url, resolve);
    const status = await exchange(message, addresses);
    return end(status, describeStatus(status));
  } catch (error) {
    return end(null, error instanceof AddressRefused ? error.message : describeFault(error));
  }
}

/** Answers with the checked addresses, whatever a name server says by now. */
function lookupOf(addresses: readonly string[]): LookupFunction {
  const all = addresses.map((address) => ({ address, family: isIPv6(address) ? 6 : 4 }));
  return (_host, options, callback) => {
    if (options.all) callback(null, all);
    else callback(null, all[0].address, all[0].family);
  };
}

function begin(message: WebhookMessage, addresses: readonly string[], signal: AbortSignal) {
  const timestamp = Math.floor(Date.now() / 1000);
  const request = message.url.startsWith('https:') ? requestHttps : requestHttp;
  return request(message.url, {
    method: 'POST',
    signal,
    lookup: lookupOf(addresses),
    // A connection of its own, so that none to another address is used again.
    agent: false,
    headers: {
      'Content-Type': 'application/json',
      'Content-Length': Buffer.byteLength(message.body),
      'User-Agent': 'Windlass',
      [webhookHeaders.event]: message.event,
      [webhookHeaders.delivery]: message.delivery,
      [webhookHeaders.timestamp]: String(timestamp),
      [webhookHeaders.signature]: signatureOf(message.secrets, timestamp, message.body),
    },
  });
}

/** The status of the answer, once the answer ended or enough of it was read. */
function exchange(message: WebhookMessage, addresses: readonly string[]): Promise<number> {
  return new Promise((done, fail) => {
    const request: ClientRequest = begin(message, addresses, AbortSignal.timeout(PATIENCE_MS));
    request.on('error', fail);
    request.on('response', (response: IncomingMessage) => {
      const status = response.statusCode ?? 0;
      let read = 0;
      response.on('data', (chunk: Buffer) => {
        read += chunk.length;
        if (read <= LONGEST_ANSWER) return;
        done(status);
        request.destroy();
      });
      response.on('end', () => done(status));
      response.on('error', fail);
    });
    request.end(message.body);
  });
}

function describeStatus(status: number): string {
  if (status >= 200 && status < 300) return '';
  if (status >= 300 && status < 400) {
    return `The answer was a redirect (${status}), which is not followed. Give the final address.`;
  }
  return `The answer was ${status}; 200 to 299 would have been right.`;
}

const faults: Record<string, string> = {
  ABORT_ERR: `There was no whole answer within ${PATIENCE_MS / 1000} seconds.`,
  ECONNREFUSED: 'Nothing listens there: the connection was refused.',
  ECONNRESET: 'The connection was cut before the answer.',
  EPIPE: 'The connection was cut before the answer.',
  EHOSTUNREACH: 'No way leads to that address.',
  ENETUNREACH: 'No way leads to that address.',
  ETIMEDOUT: 'The connection could not be made in time.',
  CERT_HAS_EXPIRED: 'Its certificate has expired.',
  DEPTH_ZERO_SELF_SIGNED_CERT: 'Its certificate is signed by itself, so nobody vouches for it.',
  SELF_SIGNED_CERT_IN_CHAIN: 'Its certificate is signed by somebody this server does not know.',
  UNABLE_TO_VERIFY_LEAF_SIGNATURE: 'Its certificate cannot be verified; its chain may be missing.',
  UNABLE_TO_GET_ISSUER_CERT_LOCALLY: 'Its certificate is signed by somebody not known here.',
  ERR_TLS_CERT_ALTNAME_INVALID: 'Its certificate is for another name.',
};

function describeFault(error: unknown): string {
  const { code, name, errors } = error as Partial<AggregateError & { code: string }>;
  const known = faults[name === 'TimeoutError' ? 'ABORT_ERR' : (code ?? '')];
  if (known) return known;
  const inner = (errors as { code?: string }[] | undefined)?.[0]?.code ?? code;
  return (inner && faults[inner]) ?? `The message could not be sent (${inner ?? 'no answer'}).`;
}
