/** Operators look after the machines. They are named on the command line only, and see technical data only. */
import { error } from '@sveltejs/kit';
import { and, asc, desc, eq, ne } from 'drizzle-orm';
import { db, type Executor } from './db';
import { operatorEvents, users } from './db/schema';

/** An operator who asks, and from where. */
export interface Operator {
  readonly userId: string;
  readonly address: string;
}

/** The operator who asks. For everybody else, signed in or not, the page is not there. */
export function whoOperates(event: {
  readonly locals: App.Locals;
  readonly getClientAddress: () => string;
}): Operator {
  const { user } = event.locals;
  if (!user?.isOperator) error(404, 'There is no page at this address.');
  return { userId: user.id, address: event.getClientAddress() };
}

/** Adds one line to the operators' record, as a part of the caller's transaction; no operator is the command line. */
export async function recordOperation(
  executor: Executor,
  operator: Operator | null,
  action: string,
  subject: string,
  details: Record<string, unknown> = {},
): Promise<void> {
  await executor.insert(operatorEvents).values({
    actorId: operator?.userId ?? null,
    action,
    subject,
    address: operator?.address ?? '',
    details,
  });
}

/** The latest lines of the operators' record. */
export function readOperations(shown: number) {
  return db
    .select({
      id: operatorEvents.id,
      at: operatorEvents.at,
      actor: users.name,
      action: operatorEvents.action,
      subject: operatorEvents.subject,
      address: operatorEvents.address,
      details: operatorEvents.details,
    })
    .from(operatorEvents)
    .leftJoin(users, eq(users.id, operatorEvents.actorId))
    .orderBy(desc(operatorEvents.id))
    .limit(shown);
}

/** Makes the person with an address an operator, or no longer one. Says what was the case. */
export async function setOperator(
  email: string,
  isOperator: boolean,
): Promise<'changed' | 'was so already' | 'unknown'> {
  const address = email.trim().toLowerCase();
  return db.transaction(async (tx) => {
    const [changed] = await tx
      .update(users)
      .set({ isOperator })
      .where(and(eq(users.email, address), ne(users.isOperator, isOperator)))
      .returning({ id: users.id });
    if (changed) {
      const action = isOperator ? 'add operator' : 'remove operator';
      await recordOperation(tx, null, action, `user:${changed.id}`, { email: address });
      return 'changed';
    }
    const isKnown = (await tx.$count(users, eq(users.email, address))) > 0;
    return isKnown ? 'was so already' : 'unknown';
  });
}

/** The addresses of all operators. */
export async function listOperators(): Promise<string[]> {
  const rows = await db
    .select({ email: users.email })
    .from(users)
    .where(eq(users.isOperator, true))
    .orderBy(asc(users.email));
  return rows.map(({ email }) => email);
}
