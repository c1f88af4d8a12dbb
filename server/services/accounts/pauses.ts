import { createHash } from 'node:crypto';
import { eq, inArray, lt, sql } from 'drizzle-orm';
import type { Db } from '../../database/open.ts';
import { signInFailure } from '../../database/schema.ts';

/** How failures under one key slow the next try. All times in seconds. */
interface Slope {
  /** So many failures cost nothing. */
  readonly free: number;
  /** The pause after the first one more; it doubles with each that follows. */
  readonly firstPause: number;
  readonly longestPause: number;
  /** One failure is forgotten each time that so long has passed without another. */
  readonly forgetsOneIn: number;
}

/**
 * Source: common practice, no source, but for two points. NIST SP 800-63B, section 5.2.2 asks for at most 100 failures in a row per account;
 * `account` allows about as many in a day. `address` starts above what 60 people behind one address make who each mistype four times.
 */
const SLOPES = {
  'account-address': { free: 5, firstPause: 30, longestPause: 900, forgetsOneIn: 600 },
  account: { free: 15, firstPause: 15, longestPause: 900, forgetsOneIn: 1800 },
  address: { free: 240, firstPause: 30, longestPause: 900, forgetsOneIn: 30 },
  /** A browser that signed in to the account before answers for its own failures only. */
  'account-browser': { free: 10, firstPause: 15, longestPause: 300, forgetsOneIn: 300 },
  /** The present password, asked of a person who is signed in. */
  person: { free: 5, firstPause: 30, longestPause: 900, forgetsOneIn: 600 },
} as const satisfies Record<string, Slope>;
type Level = keyof typeof SLOPES;

/** Longer than the longest memory that matters: rows that are older count as nothing. */
const FORGOTTEN_MS = 3 * 24 * 3600 * 1000;

export interface Key {
  readonly level: Level;
  readonly key: string;
}

/** Who tries: e-mail and network address as typed and seen; `browser` is the hash of a cookie that signed in to this account before. */
export interface Trier {
  readonly email: string;
  readonly address: string;
  readonly browser: string | null;
}

/** The key under which failures for one account are counted, whether the account is there or not. The address is hashed: people mistype passwords into it. */
export function accountKey(email: string): string {
  return `account:${digest(email.trim().toLowerCase())}`;
}

export function signInKeys({ email, address, browser }: Trier): readonly Key[] {
  const account = accountKey(email);
  if (browser) return [{ level: 'account-browser', key: `${account}:browser:${browser}` }];
  const place = networkOf(address);
  return [
    { level: 'account', key: account },
    { level: 'account-address', key: `account-address:${digest(email.trim().toLowerCase())}:${place}` },
    { level: 'address', key: `address:${place}` },
  ];
}

export function personKeys(userId: string): readonly Key[] {
  return [{ level: 'person', key: `person:${userId}` }];
}

/**
 * Admits one try (0), or says how many whole seconds to wait. A try that is admitted counts as failed at once, so that many sent together cannot
 * all slip through; `succeeded` takes that back. A try that has to wait counts as nothing.
 */
export async function admit(db: Db, keys: readonly Key[], now: Date): Promise<number> {
  return db.transaction(async (tx) => {
    await tx.delete(signInFailure).where(lt(signInFailure.lastAt, new Date(now.getTime() - FORGOTTEN_MS)));
    const names = keys.map(({ key }) => key);
    await tx
      .insert(signInFailure)
      .values(names.map((key) => ({ key, count: 0, lastAt: now })))
      .onConflictDoNothing();
    // In one order, so that two tries never wait for each other.
    const rows = await tx
      .select()
      .from(signInFailure)
      .where(inArray(signInFailure.key, names))
      .orderBy(signInFailure.key)
      .for('update');
    const found = new Map(rows.map((row) => [row.key, row]));
    const counted = keys.map(({ level, key }) => ({ level, key, row: found.get(key) ?? { count: 0, lastAt: now } }));
    const wait = Math.max(...counted.map(({ level, row }) => pauseLeft(SLOPES[level], row, now)));
    if (wait > 0) return wait;
    for (const { level, key, row } of counted) {
      const count = remembered(SLOPES[level], row, now) + 1;
      await tx.update(signInFailure).set({ count, lastAt: now }).where(eq(signInFailure.key, key));
    }
    return 0;
  });
}

/** Takes back the counting of an admitted try that succeeded; what this person mistyped here before is forgotten with it. */
export async function succeeded(db: Db, keys: readonly Key[]): Promise<void> {
  for (const { level, key } of keys) {
    const here = eq(signInFailure.key, key);
    // Others' failures stay: who has one account must not wipe out what was tried on the rest.
    if (level === 'account' || level === 'address') {
      await db
        .update(signInFailure)
        .set({ count: sql`greatest(${signInFailure.count} - 1, 0)` })
        .where(here);
    } else {
      await db.delete(signInFailure).where(here);
    }
  }
}

interface Counted {
  readonly count: number;
  readonly lastAt: Date;
}

/** Whole seconds until the next try, 0 when it may come now. */
function pauseLeft({ free, firstPause, longestPause }: Slope, { count, lastAt }: Counted, now: Date): number {
  if (count < free) return 0;
  const pause = Math.min(longestPause, firstPause * 2 ** Math.min(count - free, 20));
  return Math.max(0, Math.ceil(pause - secondsSince(lastAt, now)));
}

function remembered({ forgetsOneIn }: Slope, { count, lastAt }: Counted, now: Date): number {
  return Math.max(0, count - Math.floor(secondsSince(lastAt, now) / forgetsOneIn));
}

function secondsSince(then: Date, now: Date): number {
  return Math.max(0, (now.getTime() - then.getTime()) / 1000);
}

/** The address itself for IPv4, the first 64 bits for IPv6: one subscriber has that many. Source: RFC 6177, section 2 (never longer than /64). */
function networkOf(address: string): string {
  const mapped = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i.exec(address);
  if (mapped?.[1]) return mapped[1];
  if (!address.includes(':')) return address;
  const [left = '', right = ''] = (address.split('%')[0] ?? '').toLowerCase().split('::');
  const head = left === '' ? [] : left.split(':');
  const tail = right === '' ? [] : right.split(':');
  const gap = address.includes('::') ? new Array<string>(Math.max(0, 8 - head.length - tail.length)).fill('0') : [];
  const groups = [...head, ...gap, ...tail].map((group) => group.replace(/^0+(?=.)/, ''));
  return `${groups.slice(0, 4).join(':')}::/64`;
}

function digest(text: string): string {
  return createHash('sha256').update(text).digest('hex');
}
