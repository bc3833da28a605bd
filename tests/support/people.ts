/** People and teams for flow tests, put straight into the database. */
import { randomUUID } from 'node:crypto';
import { db } from '$lib/server/db';
import { memberships, teams, users } from '$lib/server/db/schema';
import type { Member } from '$lib/server/member';
import type { Role } from '$lib/domain/roles';

/** A new team with one member of each role. */
export async function newTeam(): Promise<Record<Role, Member>> {
  const [{ id: teamId }] = await db
    .insert(teams)
    .values({ name: `Team ${randomUUID().slice(0, 6)}` })
    .returning({ id: teams.id });
  const join = async (role: Role): Promise<Member> => {
    const [{ id: userId }] = await db
      .insert(users)
      .values({
        email: `${randomUUID().slice(0, 8)}@people.example`,
        name: `A ${role}`,
        passwordHash: 'none',
      })
      .returning({ id: users.id });
    await db.insert(memberships).values({ teamId, userId, role });
    return { userId, teamId, role };
  };
  return {
    reader: await join('reader'),
    chemist: await join('chemist'),
    modeler: await join('modeler'),
    lead: await join('lead'),
  };
}
