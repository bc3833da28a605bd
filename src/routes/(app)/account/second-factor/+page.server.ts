import { fail } from '@sveltejs/kit';
import { appCodeFormSchema } from '$lib/domain/second-factor';
import { readForm } from '$lib/server/forms';
import { requireFresh } from '$lib/server/freshness';
import { drawQrCode } from '$lib/server/qr-code';
import * as recoveryCodes from '$lib/server/recovery-codes';
import * as secondFactor from '$lib/server/second-factor';
import { whoIsSignedIn } from '$lib/server/teams';
import type { Actions, PageServerLoad } from './$types';

export const load: PageServerLoad = async (event) => {
  const { user } = whoIsSignedIn(event.locals);
  // Who sees the secret can make codes ever after, so a sign-in that was left open is not enough.
  requireFresh(event);
  event.setHeaders({ 'cache-control': 'no-store' });
  const setUp = await secondFactor.setUp(user);
  return {
    setUp: setUp && { secret: setUp.secret, qrCode: drawQrCode(setUp.uri) },
    codesLeft: setUp ? 0 : await recoveryCodes.count(user.id),
  };
};

/** What a form here answers: codes to be kept, or what was wrong. */
const answer = (given: {
  done?: 'on' | 'renewed' | 'off';
  codes?: readonly string[];
  error?: string;
  wait?: number;
}) => ({ done: null, codes: null, error: undefined, wait: null, ...given });

export const actions: Actions = {
  switchOn: async (event) => {
    const { user, sessionId } = whoIsSignedIn(event.locals);
    requireFresh(event);
    const form = await readForm(event.request, appCodeFormSchema);
    if (!form.data) return fail(400, answer({ error: form.faults.errors['code'] ?? '' }));
    const wait = await secondFactor.limitCodes(user.id, event.getClientAddress());
    if (wait !== null) return fail(429, answer({ wait }));
    const who = { userId: user.id, sessionId };
    const codes = await secondFactor.switchOn(who, form.data.code);
    if (codes) return answer({ done: 'on', codes });
    const error =
      'This code is not right. Look whether the clock of your phone is, and try the next.';
    return fail(400, answer({ error }));
  },

  renew: async (event) => {
    const { user } = whoIsSignedIn(event.locals);
    requireFresh(event);
    const codes = await secondFactor.renewRecoveryCodes(user.id);
    return codes ? answer({ done: 'renewed', codes }) : fail(409, answer({}));
  },

  switchOff: async (event) => {
    const { user, sessionId } = whoIsSignedIn(event.locals);
    requireFresh(event);
    await secondFactor.switchOff({ userId: user.id, sessionId });
    return answer({ done: 'off' });
  },
};
