/** The demo: an invented team that compares substituted dienes and biaryls for a coating. */
import { and, eq, sql } from 'drizzle-orm';
import type { Role } from '../domain/roles';
import { db, type Executor } from './db';
import { memberships, teams, users } from './db/schema';
import { environment } from './environment';
import { submitDemoBatches } from './demo-batches';
import type { Member } from './member';
import { hashPassword } from './passwords';

export const DEMO_TEAM = 'Skerry Coatings';
const DEMO_SEED_LOCK = 4_810_002;

/** All addresses end in .example, which no mail can ever reach (RFC 2606). */
const members = [
  { name: 'Ines Vogt', email: 'ines.vogt@skerry.example', role: 'lead' },
  { name: 'Malik Osei', email: 'malik.osei@skerry.example', role: 'modeler' },
  { name: 'Yuki Tanabe', email: 'yuki.tanabe@skerry.example', role: 'chemist' },
  { name: 'Jo Marsh', email: 'jo.marsh@tideline.example', role: 'reader' },
] as const satisfies readonly { name: string; email: string; role: Role }[];

/** Whoever tries the product on their own machine wants to see its operator's page as well. */
const OPERATOR = members[0].email;

export interface DemoSignIn {
  readonly email: string;
  /** Their role in the team, and what they are beside it. */
  readonly role: string;
}

/** The demo's team, by its name and its lead; null where no demo was seeded. */
export async function findDemoTeam(executor: Executor): Promise<string | null> {
  const [found] = await executor
    .select({ id: teams.id })
    .from(teams)
    .innerJoin(memberships, eq(memberships.teamId, teams.id))
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(teams.name, DEMO_TEAM), eq(users.email, members[0].email)))
    .limit(1);
  return found?.id ?? null;
}

async function openTeam(executor: Executor): Promise<string> {
  const [team] = await executor
    .insert(teams)
    .values({ name: DEMO_TEAM })
    .returning({ id: teams.id });
  return team!.id;
}

/** Makes sure that the demo is there and that its members' password is the present one; answers its sign-ins. */
export async function seedDemo(): Promise<DemoSignIn[]> {
  const password = environment.WINDLASS_DEMO_PASSWORD;
  if (!password) throw new Error('Seeding the demo needs WINDLASS_DEMO_PASSWORD.');
  const passwordHash = await hashPassword(password);
  const modeler = await db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(${DEMO_SEED_LOCK})`);
    const teamId = (await findDemoTeam(tx)) ?? (await openTeam(tx));
    let submitter: Member | null = null;
    for (const { name, email, role } of members) {
      const [user] = await tx
        .insert(users)
        .values({
          name,
          email,
          passwordHash,
          confirmedAt: sql`now()`,
          isOperator: email === OPERATOR,
        })
        .onConflictDoUpdate({ target: users.email, set: { passwordHash, confirmedAt: sql`now()` } })
        .returning({ id: users.id });
      await tx.insert(memberships).values({ teamId, userId: user!.id, role }).onConflictDoNothing();
      if (role === 'modeler') submitter = { userId: user!.id, teamId, role };
    }
    return submitter;
  });
  if (modeler) await submitDemoBatches(modeler);
  return members.map(({ email, role }) => ({
    email,
    role: email === OPERATOR ? `${role}, operator` : role,
  }));
}
