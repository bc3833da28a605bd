/** Removes what is of no use any more or has reached its age; any number of processes may do it. */
import * as apiTokens from './api-tokens';
import * as drafts from './drafts';
import * as idempotency from './idempotency';
import * as invitations from './invitations';
import * as letterTokens from './letter-tokens';
import { log } from './log';
import * as molecules from './molecules';
import { forgetFullBuckets } from './rate-limits';
import { keepRetention } from './retention';
import * as sessions from './sessions';
import * as webhookLog from './webhook-log';
import * as workers from './workers';
import * as signInSteps from './sign-in-steps';
import { deleteDueTeams } from './team-deletion';
import { warnOfStorage } from './storage-letters';

const INTERVAL_MS = 3_600_000;
const FIRST_MS = 60_000;

/** Does all of it once. */
export async function tidy(): Promise<void> {
  await drafts.forgetOld();
  await molecules.forgetUnused();
  await letterTokens.forgetExpired();
  await invitations.forgetExpired();
  await apiTokens.forgetExpired();
  await idempotency.forgetOld();
  await sessions.forgetEnded();
  await webhookLog.forgetOld();
  await workers.forgetGone();
  await signInSteps.forgetExpired();
  await forgetFullBuckets();
  await warnOfStorage();
  await keepRetention();
  await deleteDueTeams();
}

/** Tidies soon after the start and then once an hour, as long as the process runs. */
export function keepHouse(): void {
  const attempt = () =>
    void tidy().catch((error: unknown) => log.warn({ error }, 'Tidying failed; it is tried again'));
  setTimeout(attempt, FIRST_MS).unref();
  setInterval(attempt, INTERVAL_MS).unref();
}
