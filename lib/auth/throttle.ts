import { createHash } from 'node:crypto'
import type { EntityManager } from '@mikro-orm/postgresql'
import { inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { now } from '@/lib/runtime'

/**
 * Brakes on guessing. A try is counted before the password is looked at, so that many at once gain nothing, and
 * taken back when it succeeds. Three kinds of counter stand in `sign_in_throttles`:
 *
 * - one account from one address: after 5 failures 30 s, doubling to 15 min;
 * - one account from addresses it never signed in from: after 10 failures 5 s between tries;
 * - one address: after 30 failures 2 s between tries, since a whole cooperage may stand behind one.
 *
 * The last two only slow: nobody can lock a colleague out, and from a known address they do not even slow.
 */
type Rule = { freeFailures: number; firstBlockS: number; longestBlockS: number }

const pairRule: Rule = { freeFailures: 5, firstBlockS: 30, longestBlockS: 900 }
const accountRule: Rule = { freeFailures: 10, firstBlockS: 5, longestBlockS: 5 }
const addressRule: Rule = { freeFailures: 30, firstBlockS: 2, longestBlockS: 2 }
/** A tablet has several people: twice as many wrong PINs as one person before it waits. */
const deviceRule: Rule = { freeFailures: 10, firstBlockS: 30, longestBlockS: 900 }

/** A counter begins anew when nothing failed, and nothing was blocked, for this long. */
const forgetAfterS = 3600
/** An address counts as known for an account while one of its sessions of this age came from there. */
const knownAddressDays = 90

type Counter = { key: string; rule: Rule }

/** A try that was counted; hand it back with {@link forgiveTry} when the password was right. */
export type CountedTry = { resetKeys: readonly string[]; undoKeys: readonly string[] }

function keyOf(kind: string, text: string): string {
  return `${kind}:${createHash('sha256').update(text).digest('hex')}`
}

/**
 * Counts a try to sign in. `email` and `address` need not exist: unknown ones are counted alike.
 * @throws AppError 'too many' with the seconds to wait, while a counter blocks.
 */
export async function countSignInTry(email: string, address: string): Promise<CountedTry> {
  const lower = email.toLowerCase()
  const pair = { key: keyOf('pair', `${lower} ${address}`), rule: pairRule }
  const account = { key: keyOf('account', lower), rule: accountRule }
  const from = { key: keyOf('address', address), rule: addressRule }
  return inTransaction(async (em) => {
    const isKnown = await isKnownAddress(em, lower, address)
    await countAll(em, isKnown ? [pair] : [pair, account, from])
    return { resetKeys: [pair.key, account.key], undoKeys: isKnown ? [] : [from.key] }
  })
}

/** Counts a try to prove oneself again (signature, change of password). @throws AppError 'too many' */
export async function countPasswordProof(accountId: string): Promise<CountedTry> {
  const counter = { key: keyOf('proof', accountId), rule: pairRule }
  return inTransaction(async (em) => {
    await countAll(em, [counter])
    return { resetKeys: [counter.key], undoKeys: [] }
  })
}

/** Counts a try to enrol a gateway: few do, so an address is braked as hard as an account. @throws AppError 'too many' */
export async function countEnrolmentTry(address: string): Promise<CountedTry> {
  const counter = { key: keyOf('enrol', address), rule: pairRule }
  return inTransaction(async (em) => {
    await countAll(em, [counter])
    return { resetKeys: [counter.key], undoKeys: [] }
  })
}

/** Counts a try to enrol a tablet or screen by its code. @throws AppError 'too many' */
export async function countDeviceEnrolmentTry(address: string): Promise<CountedTry> {
  const counter = { key: keyOf('enrol device', address), rule: pairRule }
  return inTransaction(async (em) => {
    await countAll(em, [counter])
    return { resetKeys: [counter.key], undoKeys: [] }
  })
}

/**
 * Counts a PIN typed at a device: for this person there as for a sign-in, and for the device whoever is chosen, so
 * that going through the names gains nothing. @throws AppError 'too many'
 */
export async function countPinTry(deviceId: string, accountId: string): Promise<CountedTry> {
  const pair = { key: keyOf('pin', `${accountId} ${deviceId}`), rule: pairRule }
  const device = { key: keyOf('pin device', deviceId), rule: deviceRule }
  return inTransaction(async (em) => {
    await countAll(em, [pair, device])
    return { resetKeys: [pair.key], undoKeys: [device.key] }
  })
}

/** At most 3 reset mails an hour to one e-mail and 20 from one address. @throws AppError 'too many' */
export async function countResetRequest(email: string, address: string): Promise<void> {
  const hourly = (freeFailures: number): Rule => ({ freeFailures, firstBlockS: 3600, longestBlockS: 3600 })
  await inTransaction((em) =>
    countAll(em, [
      { key: keyOf('reset', email.toLowerCase()), rule: hourly(3) },
      { key: keyOf('reset address', address), rule: hourly(20) },
    ]),
  )
}

/** The password was right: the account's counters go, the address gets its one try back. */
export async function forgiveTry(tried: CountedTry): Promise<void> {
  await inTransaction(async (em) => {
    await queryRows(em, 'delete from sign_in_throttles where key = any(?::text[])', [
      toArray(tried.resetKeys),
    ])
    await queryRows(
      em,
      `update sign_in_throttles set failures = greatest(failures - 1, 0), blocked_until = null
        where key = any(?::text[])`,
      [toArray(tried.undoKeys)],
    )
  })
}

/** A PostgreSQL array literal; the keys are ours and hold no quote. */
function toArray(keys: readonly string[]): string {
  return `{${keys.map((key) => `"${key}"`).join(',')}}`
}

async function isKnownAddress(em: EntityManager, email: string, address: string): Promise<boolean> {
  const since = new Date(now().getTime() - knownAddressDays * 24 * 3600 * 1000)
  const [row] = await queryRows<{ is_known: boolean }>(
    em,
    `select exists (select 1 from sessions s join accounts a on a.id = s.account_id
                     where lower(a.email) = ? and s.address = ? and s.created_at > ?) as is_known`,
    [email, address, since],
  )
  return row?.is_known === true
}

type CounterRow = { key: string; failures: number; window_started_at: Date; blocked_until: Date | null }

/** Locks all counters in one order, refuses when any blocks, else counts one more on each. */
async function countAll(em: EntityManager, counters: readonly Counter[]): Promise<void> {
  const at = now()
  const sorted = [...counters].sort((a, b) => (a.key < b.key ? -1 : 1))
  const rows = new Map<string, CounterRow>()
  for (const { key } of sorted) {
    const [row] = await queryRows<CounterRow>(
      em,
      `insert into sign_in_throttles (key, failures, window_started_at) values (?, 0, ?)
       on conflict (key) do update set key = excluded.key
       returning key, failures, window_started_at, blocked_until`,
      [key, at],
    )
    if (row !== undefined) rows.set(key, row)
  }
  const blockedMs = sorted.map(({ key }) => blockedUntilMs(rows.get(key)))
  const waitS = Math.ceil((Math.max(...blockedMs) - at.getTime()) / 1000)
  if (waitS > 0) throw tooMany(waitS)
  for (const { key, rule } of sorted) await countOne(em, key, rule, rows.get(key), at)
}

function blockedUntilMs(row: CounterRow | undefined): number {
  return row?.blocked_until ? new Date(row.blocked_until).getTime() : 0
}

async function countOne(em: EntityManager, key: string, rule: Rule, row: CounterRow | undefined, at: Date) {
  const startedMs = row === undefined ? at.getTime() : new Date(row.window_started_at).getTime()
  const isForgotten = at.getTime() - Math.max(startedMs, blockedUntilMs(row)) > forgetAfterS * 1000
  const failures = (isForgotten ? 0 : (row?.failures ?? 0)) + 1
  const over = failures - rule.freeFailures
  const blockS = over < 0 ? 0 : Math.min(rule.firstBlockS * 2 ** Math.min(over, 20), rule.longestBlockS)
  await queryRows(
    em,
    `update sign_in_throttles set failures = ?, window_started_at = ?, blocked_until = ? where key = ?`,
    [
      failures,
      isForgotten ? at : new Date(startedMs),
      blockS === 0 ? null : new Date(at.getTime() + blockS * 1000),
      key,
    ],
  )
}

function tooMany(waitS: number): AppError {
  const wait = waitS < 120 ? `${waitS} s` : `${Math.ceil(waitS / 60)} minutes`
  return new AppError('too many', `Too many tries. Wait ${wait}, then try again.`, { retryAfterS: waitS })
}

/** Counters that have been quiet long enough to mean nothing; called now and then so that the table stays small. */
export async function forgetOldTries(): Promise<void> {
  const before = new Date(now().getTime() - 2 * forgetAfterS * 1000)
  await inTransaction((em) =>
    queryRows(
      em,
      'delete from sign_in_throttles where window_started_at < ? and coalesce(blocked_until, window_started_at) < ?',
      [before, before],
    ),
  )
}
