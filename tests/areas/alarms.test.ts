import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { acknowledgeAlarm } from '@/lib/alarms/acknowledge-alarm'
import type { AlarmKind } from '@/lib/alarms/alarm-kinds'
import type { AlarmState } from '@/lib/alarms/alarm-states'
import { alarmMoves, alarmStates } from '@/lib/alarms/alarm-states'
import { exportAlarms } from '@/lib/alarms/export-alarms'
import { getAlarmRates } from '@/lib/alarms/get-alarm-rates'
import { insertAlarmMove, isOutOfTurn } from '@/lib/alarms/insert-alarm-move'
import { listAlarms } from '@/lib/alarms/list-alarms'
import { readAlarmStandings } from '@/lib/alarms/read-alarm-standings'
import { readFiringAlarms } from '@/lib/alarms/read-firing-alarms'
import { shelveAlarm } from '@/lib/alarms/shelve-alarm'
import { unshelveAlarm } from '@/lib/alarms/unshelve-alarm'
import { closeOrm, forkEm, inTransaction, queryRows } from '@/lib/db/orm'
import { endFiringAlarms } from '@/lib/alarms/end-firing-alarms'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { refusalOf } from '@/tests/support/firing-room'
import type { TestPeople, TestPerson } from '@/tests/support/people'
import { createPeople, createPerson } from '@/tests/support/people'
import type { TestFiring } from '@/tests/support/room'
import { createTestFiring, createTestGateway, createTestProbe, endTestFiring } from '@/tests/support/room'

let database: TestDatabase
let people: TestPeople
let otherToaster: TestPerson

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  otherToaster = await createPerson({ role: 'toaster', name: 'Osric Flint' })
})

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

const hourMs = 3_600_000

async function fire(by: TestPerson = people.toaster, startedAgoMs = hourMs): Promise<TestFiring> {
  const gateway = await createTestGateway()
  const probe = await createTestProbe(gateway.gatewayId, 1)
  const preheatAt = new Date(Date.now() - startedAgoMs)
  return createTestFiring({
    accountId: by.accountId,
    customerId: people.customers.first.id,
    state: 'toasting',
    preheatAt,
    toastAt: preheatAt,
    probes: { lead: probe.id },
  })
}

type Row = {
  from: AlarmState
  to: AlarmState
  occurrenceId?: string
  kind?: AlarmKind
  agoMs?: number
  accountId?: string | null
  reason?: string | null
  shelvedUntilMs?: number | null
}

async function add(firing: TestFiring, row: Row): Promise<string> {
  const { kind = 'wood maximum', agoMs = 0, accountId = null, reason = null, shelvedUntilMs = null } = row
  const occurrenceId = row.occurrenceId ?? randomUUID()
  await insertAlarmMove(await forkEm(), {
    firingId: firing.id,
    kind,
    subject: '',
    occurrenceId,
    from: row.from,
    to: row.to,
    atMs: Date.now() - agoMs,
    words: 'Wood at 2 mm is over 215 °C. Lid off, lower the fire.',
    value: 219.4,
    limit: 215,
    reason,
    accountId,
    shelvedUntilMs,
  })
  return occurrenceId
}

const come = (firing: TestFiring, more: Partial<Row> = {}) =>
  add(firing, { from: 'normal', to: 'unacknowledged', ...more })

async function outOfTurn(work: Promise<unknown>): Promise<boolean> {
  return work.then(
    () => false,
    (error: unknown) => isOutOfTurn(error),
  )
}

describe('the table of alarms', () => {
  it('allows the moves that the code allows, and no other', async () => {
    const rows = await queryRows<{ from_state: string; to_state: string }>(
      await forkEm(),
      'select from_state, to_state from alarm_moves',
    )
    const inCode = alarmStates.flatMap((from) => alarmMoves[from].map((to) => `${from} > ${to}`))
    expect(rows.map((row) => `${row.from_state} > ${row.to_state}`).sort()).toEqual(inCode.sort())
  })

  it('takes a move only from where the alarm stands, and each coming once', async () => {
    const firing = await fire()
    const id = await come(firing)
    expect(await outOfTurn(come(firing))).toBe(true)
    expect(await outOfTurn(add(firing, { from: 'acknowledged', to: 'normal', occurrenceId: id }))).toBe(true)
    expect(await outOfTurn(add(firing, { from: 'unacknowledged', to: 'suppressed' }))).toBe(true)
    await add(firing, { from: 'unacknowledged', to: 'suppressed', occurrenceId: id })
    await add(firing, { from: 'suppressed', to: 'normal', occurrenceId: id })
    expect(await outOfTurn(come(firing, { occurrenceId: id }))).toBe(true)
    await come(firing)
  })

  it('refuses a move that is none, and what a hand must do without one', async () => {
    const firing = await fire()
    const id = await come(firing)
    const from = { from: 'unacknowledged', occurrenceId: id } as const
    const by = people.toaster.accountId
    const inFive = Date.now() + 5 * 60_000
    await expect(add(firing, { ...from, to: 'unacknowledged' })).rejects.toThrow(/alarm_events_move_allowed/)
    await expect(add(firing, { ...from, to: 'acknowledged' })).rejects.toThrow(/seen_by_somebody/)
    await expect(add(firing, { ...from, to: 'normal' })).rejects.toThrow(/only_reminders_go_unseen/)
    const shelf = { ...from, to: 'shelved', accountId: by } as const
    await expect(add(firing, { ...shelf, shelvedUntilMs: inFive })).rejects.toThrow(/shelved_for_a_time/)
    await expect(add(firing, { ...shelf, reason: 'known' })).rejects.toThrow(/shelved_for_a_time/)
    const day = Date.now() + 24 * hourMs
    await expect(add(firing, { ...shelf, reason: 'known', shelvedUntilMs: day })).rejects.toThrow(
      /shelved_for_a_time/,
    )
    await add(firing, { ...shelf, reason: 'known', shelvedUntilMs: inFive })
  })

  it('is only ever added to, and time never falls in it', async () => {
    const firing = await fire()
    const id = await come(firing)
    const em = await forkEm()
    await expect(
      queryRows(em, 'update alarm_events set words = ? where firing_id = ?', ['x', firing.id]),
    ).rejects.toThrow()
    await expect(queryRows(em, 'delete from alarm_events where firing_id = ?', [firing.id])).rejects.toThrow()
    await add(firing, {
      from: 'unacknowledged',
      to: 'returned unacknowledged',
      occurrenceId: id,
      agoMs: hourMs,
    })
    const [alarm] = await readFiringAlarms(em, firing.id)
    expect(Date.parse(alarm?.overAt ?? '')).toBe(Date.parse(alarm?.cameAt ?? ''))
  })

  it('takes two at once one after the other: one alarm, one coming', async () => {
    const firing = await fire()
    const results = await Promise.all(Array.from({ length: 6 }, () => outOfTurn(come(firing))))
    expect(results.filter((isRefused) => !isRefused)).toHaveLength(1)
  })

  it('knows the hearth by the firing’s place, and takes no alarm of a firing that has ended', async () => {
    const firing = await fire()
    await come(firing)
    const [alarm] = await readFiringAlarms(await forkEm(), firing.id)
    expect(alarm?.hearthNumber).toBeGreaterThan(0)
    await endTestFiring(firing.id, new Date(Date.now() - 1_000))
    expect(await outOfTurn(come(firing, { kind: 'spread' }))).toBe(true)
  })
})

describe('Seen', () => {
  it('is kept with who and when; another hand on another screen changes nothing', async () => {
    const firing = await fire()
    const id = await come(firing)
    expect(await acknowledgeAlarm(people.toaster.actor, { id })).toMatchObject({
      state: 'acknowledged',
      seen: { by: people.toaster.actor.name },
    })
    const again = await acknowledgeAlarm(people.masterCooper.actor, { id })
    expect(again.seen?.by).toBe(people.toaster.actor.name)
    expect(await readAlarmStandings(await forkEm(), firing.id)).toMatchObject([{ state: 'acknowledged' }])
  })

  it('of one that is over makes it normal, and a second one still succeeds', async () => {
    const firing = await fire()
    const id = await come(firing)
    await add(firing, { from: 'unacknowledged', to: 'returned unacknowledged', occurrenceId: id })
    expect(await acknowledgeAlarm(people.toaster.actor, { id })).toMatchObject({ state: 'normal' })
    expect(await acknowledgeAlarm(people.toaster.actor, { id })).toMatchObject({ state: 'normal' })
    expect(await readAlarmStandings(await forkEm(), firing.id)).toEqual([])
  })

  it('is for those who may fire this firing', async () => {
    const firing = await fire()
    const id = await come(firing)
    expect((await refusalOf(acknowledgeAlarm(people.administrator.actor, { id }))).kind).toBe('not allowed')
    expect((await refusalOf(acknowledgeAlarm(people.chemist.actor, { id }))).kind).toBe('not allowed')
    await queryRows(await forkEm(), 'update firings set is_trial = true where id = ?', [firing.id])
    expect((await acknowledgeAlarm(people.chemist.actor, { id })).state).toBe('acknowledged')
    const unknown = await refusalOf(acknowledgeAlarm(people.toaster.actor, { id: randomUUID() }))
    expect(unknown.kind).toBe('not found')
  })

  it('by two hands at once is one Seen', async () => {
    const firing = await fire()
    const id = await come(firing)
    const hands = [people.toaster, people.masterCooper, otherToaster]
    await Promise.all(hands.map((person) => acknowledgeAlarm(person.actor, { id })))
    const rows = await queryRows(
      await forkEm(),
      `select 1 from alarm_events where occurrence_id = ? and to_state = 'acknowledged'`,
      [id],
    )
    expect(rows).toHaveLength(1)
  })
})

describe('shelving', () => {
  it('needs a reason and holds the site’s limit; it is in the audit trail', async () => {
    const firing = await fire()
    const id = await come(firing)
    const tooLong = await refusalOf(
      shelveAlarm(people.toaster.actor, { id, minutes: 16, reason: 'The probe is wrong' }),
    )
    expect(tooLong.fields['minutes']).toContain('15 min')
    const bare = await callRoute('POST', `/api/alarms/${id}/shelve`, {
      cookie: people.toaster.cookie,
      body: { minutes: 5, reason: ' ' },
    })
    expect([bare.status, Reflect.get(Object(bare.json), 'fields')]).toEqual([
      422,
      { reason: 'Say why in a few words.' },
    ])
    const shelved = await shelveAlarm(people.toaster.actor, { id, minutes: 5, reason: 'The probe is wrong' })
    expect(shelved).toMatchObject({ state: 'shelved', shelf: { reason: 'The probe is wrong' } })
    const entries = await queryRows<{ detail: Record<string, unknown> }>(
      await forkEm(),
      `select detail from audit_entries where action = 'alarm.shelved' and subject_id = ?`,
      [firing.id],
    )
    expect(entries.map((entry) => entry.detail['minutes'])).toEqual([5])
  })

  it('is taken back by a hand, and then has to be seen again; it cannot be seen while shelved', async () => {
    const firing = await fire()
    const id = await come(firing)
    await shelveAlarm(people.masterCooper.actor, { id, minutes: 5, reason: 'Known, being worked on' })
    expect((await refusalOf(acknowledgeAlarm(people.toaster.actor, { id }))).detail).toContain('Take it back')
    expect(await unshelveAlarm(people.toaster.actor, { id })).toMatchObject({ state: 'unacknowledged' })
    expect((await refusalOf(unshelveAlarm(people.toaster.actor, { id }))).kind).toBe('conflict')
  })

  it('is not for a chemist or an administrator', async () => {
    const id = await come(await fire())
    for (const person of [people.chemist, people.administrator]) {
      const refusal = await refusalOf(shelveAlarm(person.actor, { id, minutes: 5, reason: 'Meant so' }))
      expect(refusal.kind).toBe('not allowed')
    }
  })
})

it('what is on when a firing ends is put away by design, with the reason', async () => {
  const firing = await fire()
  await come(firing)
  await come(firing, { kind: 'spread' })
  await inTransaction((em) => endFiringAlarms(em, firing.id, new Date()))
  const alarms = await readFiringAlarms(await forkEm(), firing.id)
  expect(alarms.map((alarm) => [alarm.state, alarm.suppressedBy])).toEqual([
    ['suppressed', 'The firing has ended.'],
    ['suppressed', 'The firing has ended.'],
  ])
})

describe('the list', () => {
  const all = { limit: 200 } as const

  it('is paged by when they came, without a hole or a double', async () => {
    const firing = await fire()
    for (let i = 0; i < 5; i += 1) {
      const id = await come(firing, { kind: 'below band', agoMs: (5 - i) * 60_000 })
      await add(firing, { from: 'unacknowledged', to: 'suppressed', occurrenceId: id, kind: 'below band' })
      await add(firing, { from: 'suppressed', to: 'normal', occurrenceId: id, kind: 'below band' })
    }
    const ids: string[] = []
    let cursor: string | undefined
    do {
      const page = await listAlarms(people.masterCooper.actor, { firingId: firing.id, limit: 2, cursor })
      ids.push(...page.items.map((alarm) => alarm.id))
      cursor = page.nextCursor ?? undefined
    } while (cursor !== undefined)
    expect(ids).toHaveLength(5)
    expect(new Set(ids).size).toBe(5)
  })

  it('shows a toaster their own firings’ alarms only, whatever they ask for', async () => {
    const [mine, theirs] = [await fire(people.toaster), await fire(otherToaster)]
    await come(mine)
    await come(theirs)
    const asked = { ...all, toasterId: otherToaster.accountId }
    expect((await listAlarms(people.toaster.actor, asked)).items).toEqual([])
    const own = (await listAlarms(otherToaster.actor, all)).items
    expect(own.length).toBeGreaterThan(0)
    expect(own.every((alarm) => alarm.toaster?.id === otherToaster.accountId)).toBe(true)
    const rates = await getAlarmRates(otherToaster.actor, { toasterId: people.toaster.accountId })
    expect(rates.toasters.map((row) => row.id)).toEqual([otherToaster.accountId])
  })

  it('leaves reminders out unless they are asked for', async () => {
    const firing = await fire()
    await come(firing, { kind: 'reminder' })
    const of = async (kind?: 'reminder' | 'all') =>
      (await listAlarms(people.masterCooper.actor, { ...all, firingId: firing.id, kind })).items.length
    expect([await of(), await of('reminder'), await of('all')]).toEqual([0, 1, 1])
  })

  it('is written as CSV, whole', async () => {
    const firing = await fire()
    const id = await come(firing)
    await shelveAlarm(people.toaster.actor, { id, minutes: 2, reason: '=HYPERLINK("x")' })
    const file = await exportAlarms(people.masterCooper.actor, { firingId: firing.id })
    const lines: string[] = []
    for await (const line of file.rows) lines.push(line)
    expect(lines).toHaveLength(2)
    expect(lines[0]).toMatch(/^came_utc,over_utc,hearth,barrel/)
    expect(lines[1]).toContain(`"'=HYPERLINK(""x"")"`)
  })
})

describe('rates', () => {
  it('count alarms over the hours at a fire, two fires at once counted once; reminders and the suppressed not', async () => {
    const person = await createPerson({ role: 'toaster', name: 'Wilf Tarn' })
    // From 3 h ago to 1 h ago, and from 2 h ago to now: three hours at the fire.
    const first = await fire(person, 3 * hourMs)
    const second = await fire(person, 2 * hourMs)
    for (let i = 0; i < 3; i += 1) {
      const id = await come(first, { agoMs: 2 * hourMs - i * 120_000 })
      const over = { from: 'unacknowledged', to: 'returned unacknowledged', occurrenceId: id } as const
      await add(first, { ...over, agoMs: 2 * hourMs - i * 120_000 - 60_000 })
      const seen = { from: 'returned unacknowledged', to: 'normal', occurrenceId: id } as const
      await add(first, { ...seen, accountId: person.accountId, agoMs: 2 * hourMs - i * 120_000 - 90_000 })
    }
    await come(second, { kind: 'reminder', agoMs: 60_000 })
    await add(second, { from: 'normal', to: 'suppressed', kind: 'no reading', reason: 'turn', agoMs: 50_000 })
    await come(second, { kind: 'spread', agoMs: 30 * 60_000 })
    await endTestFiring(first.id, new Date(Date.now() - hourMs))
    const rates = await getAlarmRates(people.masterCooper.actor, { toasterId: person.accountId })
    expect(rates.toasters).toHaveLength(1)
    expect(rates.toasters[0]).toMatchObject({ name: 'Wilf Tarn', alarms: 4, firings: 2 })
    expect(rates.toasters[0]?.hours).toBeCloseTo(3, 2)
    expect(rates.toasters[0]?.perTenMin).toBeCloseTo(4 / 18, 2)
    expect(rates.kinds).toMatchObject([
      { kind: 'wood maximum', alarms: 3, medianS: expect.closeTo(60, 1), medianSeenS: expect.closeTo(90, 1) },
      { kind: 'spread', alarms: 1, medianS: null },
    ])
    expect(rates.chattering).toMatchObject([{ firingId: first.id, kind: 'wood maximum', times: 3 }])
    expect(rates.standing.map((alarm) => alarm.kind)).toEqual(['spread'])
  })

  it('stand in the order of names', async () => {
    const { toasters } = await getAlarmRates(people.masterCooper.actor, {})
    const names = toasters.map((row) => row.name)
    expect(names.length).toBeGreaterThan(1)
    expect(names).toEqual(names.toSorted())
  })

  it('refuse days that are out of order, by name', async () => {
    const answer = await callRoute('GET', '/api/alarm-rates?from=2027-03-02&to=2027-03-01', {
      cookie: people.masterCooper.cookie,
    })
    expect(answer.status).toBe(422)
    expect(answer.text).toContain('The last day must not be before the first.')
  })
})
