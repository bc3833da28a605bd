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
  always['strict-transport-security'] = `max-age=${ONE_YEAR_SECONDS}`;
}

/** Adds the headers; what is made for one person is not kept by caches between. */
export function addHeaders(response: Response, isPersonal: boolean): void {
  for (const [name, value] of Object.entries(always)) response.headers.set(name, value);
  if (isPersonal && !response.headers.has('cache-control')) {
    response.headers.set('cache-control', 'private, no-cache');
  }
}
