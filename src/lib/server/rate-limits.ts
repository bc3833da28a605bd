/** Token buckets in the database, shared by all web processes: how often somebody may try something. */
import { sql } from 'drizzle-orm';
import { createHash } from 'node:crypto';
import { db } from './db';
import { rateBuckets } from './db/schema';
import { environment } from './environment';

interface Limit {
  /** What may happen in one go. */
  readonly capacity: number;
  /** How fast the bucket fills again. */
  readonly perMinute: number;
}

const limits = {
  'sign in to an address': { capacity: 10, perMinute: 1 },
  'sign in from a client': { capacity: 30, perMinute: 6 },
  'code of an account': { capacity: 5, perMinute: 0.2 },
  'code from a client': { capacity: 30, perMinute: 6 },
  'letter about wrong codes': { capacity: 1, perMinute: 1 / 1440 },
  'single sign-on from a client': { capacity: 30, perMinute: 6 },
  'sign up from a client': { capacity: 10, perMinute: 0.5 },
  'letter to an address': { capacity: 4, perMinute: 0.1 },
  'letter from a client': { capacity: 10, perMinute: 0.5 },
  'try a letter from a client': { capacity: 20, perMinute: 2 },
  'open a partner link from a client': { capacity: 60, perMinute: 20 },
  'password of a partner link': { capacity: 10, perMinute: 1 },
  'wrong token from a client': { capacity: 20, perMinute: 5 },
  'ask the interface as a member': { capacity: 600, perMinute: 600 },
  'submit as a member': { capacity: 60, perMinute: 20 },
  'send to webhooks by hand': { capacity: 30, perMinute: 6 },
} as const satisfies Record<string, Limit>;
export type LimitName = keyof typeof limits;

/** One bucket to take from: which limit, and for whom. */
export type Bucket = readonly [limit: LimitName, subject: string];

/** Buckets are named by a hash, so that the table tells nobody which addresses were tried. */
function keyOf([name, subject]: Bucket): string {
  return createHash('sha256').update(`${name}\0${subject}`).digest('hex');
}

/** The network a client counts as: one IPv4 address, or the /64 that one IPv6 customer commands. */
export function clientNetwork(address: string): string {
  const mapped = /^::ffff:(\d+[.]\d+[.]\d+[.]\d+)$/i.exec(address)?.[1];
  if (mapped) return mapped;
  if (!address.includes(':')) return address;
  const [head = '', tail = ''] = address.split('%')[0]!.split('::');
  const left = head.split(':').filter(Boolean);
  const right = tail.split(':').filter(Boolean);
  const zeros = Array<string>(Math.max(0, 8 - left.length - right.length)).fill('0');
  const groups = [...left, ...zeros, ...right].slice(0, 4);
  return `${groups.map((group) => parseInt(group, 16).toString(16)).join(':')}::/64`;
}

/** What came of taking from a bucket. */
export interface Taken {
  readonly capacity: number;
  /** What is left in the bucket. */
  readonly left: number;
  /** Seconds to wait when there was nothing; null when something was taken. */
  readonly wait: number | null;
}

/** Takes one token from a bucket. */
export async function takeFrom(bucket: Bucket): Promise<Taken> {
  const { capacity: base, perMinute } = limits[bucket[0]];
  const capacity = base * environment.WINDLASS_RATE_LIMIT_FACTOR;
  const perSecond = (perMinute * environment.WINDLASS_RATE_LIMIT_FACTOR) / 60;
  const key = keyOf(bucket);
  const level = sql`least(${capacity}::float8, ${rateBuckets.tokens}
    + ${perSecond}::float8 * extract(epoch from now() - ${rateBuckets.refilledAt}))`;
  const taken = await db
    .insert(rateBuckets)
    .values({ key, tokens: capacity - 1 })
    .onConflictDoUpdate({
      target: rateBuckets.key,
      set: { tokens: sql`${level} - 1`, refilledAt: sql`now()` },
      setWhere: sql`${level} >= 1`,
    })
    .returning({ left: rateBuckets.tokens });
  if (taken[0]) return { capacity, left: taken[0].left, wait: null };
  const [bucketNow] = await db
    .select({ level: sql<number>`${level}` })
    .from(rateBuckets)
    .where(sql`${rateBuckets.key} = ${key}`);
  const left = bucketNow?.level ?? 0;
  return { capacity, left, wait: Math.max(1, Math.ceil((1 - left) / perSecond)) };
}

/** Takes a token from every bucket; answers the longest wait in seconds when one of them is empty, else null. */
export async function limitRate(...buckets: readonly Bucket[]): Promise<number | null> {
  let longest: number | null = null;
  for (const bucket of buckets) {
    const { wait } = await takeFrom(bucket);
    if (wait !== null) longest = Math.max(longest ?? 0, wait);
  }
  return longest;
}

/** Forgets buckets that have been left alone so long that they are full again. */
export async function forgetFullBuckets(): Promise<void> {
  await db.delete(rateBuckets).where(sql`${rateBuckets.refilledAt} < now() - interval '1 day'`);
}
