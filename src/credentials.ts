/** Checks what the forms of signing in give: address and password, the code of a second step, or both once more. */
import type { RequestEvent } from '@sveltejs/kit';
import { confirmAndSignInSchema, signInSchema } from '$lib/domain/accounts';
import { codeFormSchema, proveAgainSchema } from '$lib/domain/second-factor';
import { proveAgain } from '$lib/server/prove-again';
import { clientNetwork, limitRate } from '$lib/server/rate-limits';
import * as signInSteps from '$lib/server/sign-in-steps';
import type { Begun } from '$lib/server/sign-in-steps';
import * as users from '$lib/server/users';

/** Why nobody was signed in: a fault of what was given, or too many tries. */
export type SignInRefusal =
  { readonly fault: users.SignInFault | 'code' | 'late' | 'password' } | { readonly wait: number };

/** Raised when what was given is not enough. */
export class RefusedProof extends Error {
  constructor(readonly refusal: SignInRefusal) {
    super('Refused');
  }
}

const clientOf = (event: RequestEvent) => ({
  address: event.getClientAddress(),
  userAgent: event.request.headers.get('user-agent') ?? '',
});

async function limitSignIns(event: RequestEvent, email: string): Promise<void> {
  const wait = await limitRate(
    ['sign in to an address', email],
    ['sign in from a client', clientNetwork(event.getClientAddress())],
  );
  if (wait !== null) throw new RefusedProof({ wait });
}

async function checkPassword(given: object, event: RequestEvent): Promise<Begun> {
  const schema = 'confirmToken' in given ? confirmAndSignInSchema : signInSchema;
  const parsed = schema.safeParse(given);
  if (!parsed.success) throw new RefusedProof({ fault: 'wrong' });
  await limitSignIns(event, parsed.data.email);
  const outcome = await users.signIn(parsed.data, clientOf(event));
  if ('fault' in outcome) throw new RefusedProof(outcome);
  event.locals.stepId = 'stepId' in outcome ? outcome.stepId : null;
  return outcome;
}

async function checkCode(given: object, event: RequestEvent): Promise<Begun> {
  const { stepId } = event.locals;
  if (!stepId) throw new RefusedProof({ fault: 'late' });
  const parsed = codeFormSchema.safeParse(given);
  if (!parsed.success) throw new RefusedProof({ fault: 'code' });
  const outcome = await signInSteps.finish(stepId, parsed.data.code, clientOf(event));
  if (!('sessionId' in outcome)) throw new RefusedProof(outcome);
  return outcome;
}

async function checkAgain(given: object, event: RequestEvent): Promise<Begun> {
  const { user, sessionId, proof } = event.locals;
  const parsed = proveAgainSchema.safeParse(given);
  if (!user || !sessionId || !proof) throw new RefusedProof({ fault: 'late' });
  if (!parsed.success) throw new RefusedProof({ fault: 'password' });
  await limitSignIns(event, user.email);
  const who = { userId: user.id, sessionId, shown: proof };
  const outcome = await proveAgain(who, parsed.data, clientOf(event));
  if (!('sessionId' in outcome)) throw new RefusedProof(outcome);
  return { userId: user.id, sessionId: outcome.sessionId };
}

/** Checks the fields of a form by their kind; throws RefusedProof when they are not enough. */
export async function checkGiven(given: unknown, event: RequestEvent): Promise<Begun> {
  const fields = typeof given === 'object' && given !== null ? given : {};
  const kind = 'kind' in fields ? fields.kind : 'password';
  if (kind === 'code') return checkCode(fields, event);
  if (kind === 'again') return checkAgain(fields, event);
  return checkPassword(fields, event);
}
