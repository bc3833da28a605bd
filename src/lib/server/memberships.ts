/** Who belongs to a team. */
import { asc, desc, eq } from 'drizzle-orm';
import { db } from './db';
import { memberships, users } from './db/schema';
import type { Member } from './member';

/** The members of the asking member's team, the most trusted first. */
export function listMembers(member: Member) {
  return db
    .select({
      id: users.id,
      name: users.name,
      email: users.email,
      role: memberships.role,
      since: memberships.createdAt,
    })
    .from(memberships)
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(eq(memberships.teamId, member.teamId))
    .orderBy(desc(memberships.role), asc(users.name));
}
