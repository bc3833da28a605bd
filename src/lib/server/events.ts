/** The record of who did what to what, and when; rows are only ever added. */
import type { Executor } from './db';
import { events } from './db/schema';
import type { Member } from './member';

/** Adds one line to a team's record, as a part of the caller's transaction. */
export async function recordEvent(
  executor: Executor,
  member: Pick<Member, 'userId' | 'teamId' | 'address'>,
  action: string,
  subject: string,
  details: Record<string, unknown> = {},
): Promise<void> {
  await executor.insert(events).values({
    teamId: member.teamId,
    actorId: member.userId,
    action,
    subject,
    address: member.address ?? '',
    details,
  });
}
