import { describe, expect, it } from 'vitest';
import { mayReadMetrics } from './metrics-access';

const TOKEN = 'a-token-for-the-collector';
const asks = (headers: Record<string, string>, address: string, token?: string) =>
  mayReadMetrics(new Headers(headers), address, token);

describe('reading metrics', () => {
  it('is for this machine only while no token is set, and not for whom a proxy speaks', () => {
    for (const address of ['127.0.0.1', '::1', '::ffff:127.0.0.1']) {
      expect(asks({}, address)).toBe(true);
    }
    for (const address of ['192.0.2.1', '10.0.0.1', '::ffff:10.0.0.1', '']) {
      expect(asks({}, address)).toBe(false);
    }
    expect(asks({ 'x-forwarded-for': '192.0.2.1' }, '127.0.0.1')).toBe(false);
    expect(asks({ forwarded: 'for=192.0.2.1' }, '127.0.0.1')).toBe(false);
  });

  it('needs the token from everywhere once it is set', () => {
    expect(asks({ authorization: `Bearer ${TOKEN}` }, '192.0.2.1', TOKEN)).toBe(true);
    expect(asks({ authorization: `bearer ${TOKEN}x` }, '192.0.2.1', TOKEN)).toBe(false);
    expect(asks({ authorization: TOKEN }, '192.0.2.1', TOKEN)).toBe(false);
    expect(asks({}, '127.0.0.1', TOKEN)).toBe(false);
  });
});
