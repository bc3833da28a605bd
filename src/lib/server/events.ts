/** The record of who did what to what, and when; rows are only ever added. */
import type { Executor } from './db';
import { events } from './db/schema';
import type { Member } from './member';

/** Who did it; a partner with a link has no account. */
type Actor = Pick<Member, 'teamId' | 'address'> & { readonly userId: string | null };

/** Adds one line to a team's record, as a part of the caller's transaction. */
export async function recordEvent(
  executor: Executor,
  actor: Actor,
  action: string,
  subject: string,
  details: Record<string, unknown> = {},
): Promise<void> {
  await executor.insert(events).values({
    teamId: actor.teamId,
    actorId: actor.userId,
    action,
    subject,
    address: actor.address ?? '',
    details,
  });
}

/** Adds a line to the record of what happened to an account, which belongs to no team. */
export async function recordAccountEvent(
  executor: Executor,
  userId: string,
  action: string,
): Promise<void> {
  await executor.insert(events).values({ actorId: userId, action, subject: `user:${userId}` });
}
