/** Headers that every answer carries (OWASP HTTP Security Response Headers Cheat Sheet); the CSP is svelte.config.js's. */
import { environment } from './environment';

const always: Record<string, string> = {
  'x-content-type-options': 'nosniff',
  'x-frame-options': 'DENY',
  // Not 'no-referrer': with it browsers send forms without their origin, which the check against forgery needs.
  'referrer-policy': 'same-origin',
  'permissions-policy':
    'accelerometer=(), camera=(), display-capture=(), geolocation=(), gyroscope=(), magnetometer=(), microphone=(), midi=(), payment=(), usb=()',
  'cross-origin-opener-policy': 'same-origin',
  'cross-origin-resource-policy': 'same-origin',
};

const ONE_YEAR_SECONDS = 31_536_000;
if (environment.WINDLASS_ORIGIN.startsWith('https:')) {
  always['strict-transport-security'] = `max-age=${ONE_YEAR_SECONDS}; includeSubDomains`;
}

/** Of what is no page: nothing in it runs or loads anything; drawings bring their own style. */
const POLICY_OF_DATA =
  "default-src 'none'; style-src 'unsafe-inline'; object-src 'none'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'";

/** Adds the headers; what is made for one person is kept by nobody, unless it says so. */
export function addHeaders(response: Response, isPersonal: boolean): void {
  for (const [name, value] of Object.entries(always)) response.headers.set(name, value);
  const type = response.headers.get('content-type') ?? '';
  if (/^text\/(html|plain|csv)$/.test(type)) {
    response.headers.set('content-type', `${type}; charset=utf-8`);
  }
  if (!response.headers.has('content-security-policy')) {
    response.headers.set('content-security-policy', POLICY_OF_DATA);
  }
  if (isPersonal && !/(^|, )(private|no-store)/.test(response.headers.get('cache-control') ?? '')) {
    response.headers.set('cache-control', 'no-store');
  }
}
