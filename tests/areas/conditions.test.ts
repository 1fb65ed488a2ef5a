import { randomUUID } from 'node:crypto'
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest'
import { carbonMonoxideLine } from '@/lib/conditions/carbon-monoxide-line'
import { getCarbonMonoxideLine } from '@/lib/conditions/get-carbon-monoxide-line'
import { getDay } from '@/lib/conditions/get-day'
import { getFiringAir } from '@/lib/conditions/get-firing-air'
import { listDays } from '@/lib/conditions/list-days'
import { previewExposureFile } from '@/lib/conditions/preview-exposure-file'
import { recordAir } from '@/lib/conditions/record-air'
import { recordExposure } from '@/lib/conditions/record-exposure'
import { removeAir } from '@/lib/conditions/remove-air'
import { removeExposure } from '@/lib/conditions/remove-exposure'
import { removeExposureFile } from '@/lib/conditions/remove-exposure-file'
import type { ExposureFile, RecordExposure } from '@/lib/conditions/schema'
import { dayBounds, dayOf } from '@/lib/site/site-day'
import { uploadExposureFile } from '@/lib/conditions/upload-exposure-file'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { setClock } from '@/lib/runtime'
import { getSiteSettings } from '@/lib/site/get-site-settings'
import { updateSiteSettings } from '@/lib/site/update-site-settings'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { refusalOf } from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'
import { createTestFiring, createTestGateway, createTestProbe } from '@/tests/support/room'

let database: TestDatabase
let people: TestPeople

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
})

afterEach(() => setClock(null))

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

const air = (at: string, changes: Partial<Parameters<typeof recordAir>[1]> = {}) =>
  recordAir(people.toaster.actor, {
    id: randomUUID(),
    place: 'room',
    at,
    tempC: 18,
    humidityPercent: 55,
    ...changes,
  })

const none = { ppm: null, wbgtC: null, wetBulbC: null, globeC: null }
const exposure = (changes: Partial<RecordExposure> & { at: string }) =>
  recordExposure(people.toaster.actor, {
    id: randomUUID(),
    kind: 'carbon monoxide',
    subject: 'T. Ash',
    ...none,
    ...(changes.kind === 'heat' ? {} : { ppm: 10 }),
    ...changes,
  })

const day = (of: string) => getDay(people.toaster.actor, { day: of })

describe('the air of room and yard', () => {
  test('is kept by day in the site’s time zone (Paris), with the moisture that wood comes to in it', async () => {
    // 23:30 UTC on 4 March is half past midnight on the 5th in Paris.
    await air('2026-03-04T23:30:00Z', { place: 'yard', tempC: 5, humidityPercent: 90 })
    await air('2026-03-05T08:00:00Z')
    expect((await day('2026-03-04')).air).toEqual([])
    const kept = (await day('2026-03-05')).air
    expect(kept.map((reading) => reading.place)).toEqual(['yard', 'room'])
    // Wood Handbook Table 4-2: at 4.4 °C and 90 % 21.5 %, at 10 °C 21.2 %, between which 5 °C lies.
    expect(kept[0]?.equilibriumMoisturePercent).toBeGreaterThan(20.9)
    expect(kept[0]?.equilibriumMoisturePercent).toBeLessThan(21.5)
  })

  test('the same id again changes nothing, a future reading is refused, taken back it counts no more', async () => {
    const id = randomUUID()
    await air('2026-03-06T08:00:00Z', { id })
    await air('2026-03-06T08:00:00Z', { id, tempC: 40 })
    expect((await day('2026-03-06')).air).toMatchObject([{ tempC: 18 }])
    const future = new Date(Date.now() + 3_600_000).toISOString()
    expect(await refusalOf(air(future))).toMatchObject({ fields: { at: expect.any(String) } })
    await removeAir(people.masterCooper.actor, { id, reason: 'Read in the sun' })
    const after = await day('2026-03-06')
    expect(after.air).toEqual([])
    expect(after.missing).toContain('No room temperature that day.')
    expect(await refusalOf(removeAir(people.toaster.actor, { id, reason: 'again' }))).toMatchObject({
      kind: 'not found',
    })
  })

  test('a day is 23 h long when the clocks go forward, and 25 when they go back', () => {
    const hours = (of: string) => {
      const { fromAt, untilAt } = dayBounds(of, 'Europe/Paris')
      return (untilAt.getTime() - fromAt.getTime()) / 3_600_000
    }
    expect([hours('2026-03-28'), hours('2026-03-29'), hours('2026-10-25')]).toEqual([24, 23, 25])
    expect(dayOf(new Date('2026-03-29T22:30:00Z'), 'Europe/Paris')).toBe('2026-03-30')
  })
})

let channel = 0
async function firingOn(preheatAt: string, toastAt: string) {
  const gateway = await createTestGateway()
  const lead = await createTestProbe(gateway.gatewayId, (channel += 1))
  return createTestFiring({
    accountId: people.toaster.accountId,
    customerId: people.customers.first.id,
    state: 'toasting',
    preheatAt: new Date(preheatAt),
    toastAt: new Date(toastAt),
    probes: { lead: lead.id },
  })
}

describe('the air of a firing', () => {
  test('is the nearest reading of the same day to its toast start, and no further than the site says', async () => {
    const firing = await firingOn('2026-04-10T08:00:00Z', '2026-04-10T09:00:00Z')
    await air('2026-04-10T06:00:00Z', { tempC: 11 })
    await air('2026-04-10T09:20:00Z', { tempC: 19 })
    await air('2026-04-10T09:00:01Z', { tempC: 99 - 60, place: 'yard' })
    expect(await getFiringAir(people.toaster.actor, { id: firing.id })).toMatchObject({
      day: '2026-04-10',
      room: { tempC: 19 },
      yard: { tempC: 39 },
    })
    const shown = (await day('2026-04-10')).firings
    expect(shown).toMatchObject([{ id: firing.id, room: { tempC: 19 }, yard: { tempC: 39 } }])
  })

  test('five hours away, or of the evening before, it is none', async () => {
    const firing = await firingOn('2026-04-12T22:10:00Z', '2026-04-12T22:30:00Z')
    // 22:30 UTC is half past midnight of the 13th in Paris: 21:50 UTC is near, but of the day before.
    await air('2026-04-12T21:50:00Z')
    await air('2026-04-13T04:00:00Z', { place: 'yard' })
    expect(await getFiringAir(people.toaster.actor, { id: firing.id })).toMatchObject({
      day: '2026-04-13',
      room: null,
      yard: null,
    })
  })

  test('a customer is told nothing', async () => {
    const answer = await callRoute('GET', '/api/conditions', { cookie: people.customer.cookie })
    expect(answer.status).toBe(403)
  })
})

describe('carbon monoxide', () => {
  test('29 CFR 1910.1000(d)(1): 8-hour mean by subject, against the site’s limits, with what readings cover', async () => {
    for (const [hour, ppm] of [
      [7, 150],
      [8, 150],
      [9, 75],
      [10, 75],
      [11, 50],
      [12, 50],
      [13, 50],
      [14, 50],
    ] as const) {
      await exposure({ at: `2026-05-04T${String(hour).padStart(2, '0')}:00:00Z`, ppm })
    }
    await exposure({ at: '2026-05-04T07:30:00Z', ppm: 210, subject: 'Hearth 2' })
    const { carbonMonoxide } = await day('2026-05-04')
    const [hearth, ash] = carbonMonoxide
    expect(ash).toMatchObject({ subject: 'T. Ash', readingCount: 8, coveredH: 8, peakPpm: 150 })
    expect(ash?.mean8hPpm).toBeCloseTo(81.25, 9)
    expect(ash?.over.map((limit) => limit.ppm)).toEqual([35, 50])
    expect(hearth).toMatchObject({ subject: 'Hearth 2', coveredH: 1 })
    expect(hearth?.mean8hPpm).toBeCloseTo(26.25, 9)
    expect(hearth?.over).toMatchObject([{ kind: 'ceiling', ppm: 200 }])
  })

  test('the same subject in other letter case is one; two readings of one instant are refused', async () => {
    await exposure({ at: '2026-05-05T07:00:00Z' })
    await exposure({ at: '2026-05-05T08:00:00Z', subject: 't. ash' })
    expect((await day('2026-05-05')).carbonMonoxide).toHaveLength(1)
    expect(await refusalOf(exposure({ at: '2026-05-05T08:00:00Z' }))).toMatchObject({
      fields: { at: expect.stringContaining('already') },
    })
  })

  test('today’s line says that nothing was read, or what was, and each time what decides', async () => {
    setClock(() => Date.parse('2026-05-06T12:30:00Z'))
    expect(await getCarbonMonoxideLine(people.toaster.actor)).toBe(
      'No CO reading today. The alarm you wear decides.',
    )
    expect((await getDay(people.toaster.actor, {})).missing).toContain(
      'No CO reading today. The alarm you wear decides.',
    )
    await exposure({ at: '2026-05-06T12:00:00Z', ppm: 40 })
    // Half an hour at 40 ppm over 8 h: what has not happened yet is not counted.
    expect(await getCarbonMonoxideLine(people.toaster.actor)).toMatch(
      /^1 CO reading today, the last at 14:00: 8-hour mean 3 ppm, peak 40 ppm\. The alarm you wear decides\.$/,
    )
    expect(carbonMonoxideLine([], 'UTC')).toMatch(/decides\.$/)
  })

  test('limits are the site’s: a stricter one is passed at once', async () => {
    const {
      changedAt: _at,
      changedBy: _by,
      isDemo: _demo,
      ...settings
    } = await getSiteSettings(people.administrator.actor)
    const strict = { name: 'House', kind: '8-hour mean' as const, ppm: 5, source: 'House rule 3' }
    const room = {
      ...settings.room,
      exposure: { ...settings.room.exposure, carbonMonoxideLimits: [strict] },
    }
    await updateSiteSettings(people.administrator.actor, { ...settings, room })
    expect((await day('2026-05-04')).carbonMonoxide[0]?.over).toEqual([strict])
    await updateSiteSettings(people.administrator.actor, { ...settings, version: settings.version + 1 })
  })
})

describe('heat', () => {
  test('is WBGT as given or made of wet bulb and globe, its hottest hour against limits at the site’s metabolic rate', async () => {
    await exposure({ kind: 'heat', at: '2026-07-01T08:00:00Z', wetBulbC: 22, globeC: 40 })
    await exposure({ kind: 'heat', at: '2026-07-01T09:00:00Z', wbgtC: 29 })
    const { heat, heatLimits, byHand } = await day('2026-07-01')
    // 0.7·22 + 0.3·40 = 27.4 °C (ISO 7243, indoors).
    expect(byHand[0]?.value).toBeCloseTo(27.4, 9)
    expect(heat).toMatchObject([{ hottestHourC: 29, over: 'exposure limit', coveredH: 2 }])
    // NIOSH 2016-106 at 300 W: 59.9 − 14.1·log10 300 and 56.7 − 11.5·log10 300.
    expect(heatLimits.alertC).toBeCloseTo(24.97, 2)
    expect(heatLimits.exposureC).toBeCloseTo(28.21, 2)
  })

  test('a heat reading takes the WBGT or both temperatures, and no ppm', async () => {
    const send = (body: object) =>
      callRoute('POST', '/api/exposure-readings', {
        cookie: people.toaster.cookie,
        body: { id: randomUUID(), kind: 'heat', subject: 'Room', ...body },
      })
    for (const [body, field] of [
      [{}, 'wbgtC'],
      [{ wetBulbC: 22 }, 'globeC'],
      [{ globeC: 40 }, 'wetBulbC'],
      [{ wbgtC: 27, globeC: 40 }, 'wbgtC'],
      [{ wbgtC: 27, ppm: 3 }, 'ppm'],
    ] as const) {
      const answer = await send(body)
      expect(answer.status).toBe(422)
      expect(answer.json).toMatchObject({ fields: { [field]: expect.any(String) } })
    }
  })
})

const fileOf = (text: string, changes: Partial<ExposureFile> = {}): ExposureFile => ({
  kind: 'carbon monoxide',
  subject: 'M. Reed',
  fileName: 'meter.csv',
  text,
  dateOrder: 'year first',
  zone: 'site',
  temperatureUnit: 'C',
  columns: {},
  ...changes,
})
const preview = (text: string, changes: Partial<ExposureFile> = {}) =>
  previewExposureFile(people.toaster.actor, fileOf(text, changes))
const upload = (text: string, changes: Partial<ExposureFile> & { id?: string; skipsFaulty?: boolean } = {}) =>
  uploadExposureFile(people.toaster.actor, {
    id: randomUUID(),
    skipsFaulty: false,
    ...fileOf(text, changes),
    ...changes,
  })

describe('a meter’s file', () => {
  test.each([
    ['commas', 'Time,CO (ppm)\n2026-06-01 08:00,4.5\n2026-06-01 08:01,6\n', {}],
    [
      'semicolons and decimal commas',
      'Zeit;CO ppm\n01.06.2026 08:00;4,5\n01.06.2026 08:01;6,0\n',
      { dateOrder: 'day first' },
    ],
    ['tabs', 'Time\tCO\n2026/06/01 08:00:00\t4.5\n2026/06/01 08:01:00\t6\n', {}],
    [
      'date and time apart',
      'Date,Time,ppm\n06/01/2026,08:00 AM,4.5\n06/01/2026,08:01 AM,6\n',
      { dateOrder: 'month first' },
    ],
    [
      'a head of its own',
      'Meter;77120\nStart time;2026-06-01 08:00\n\nTime;CO\n2026-06-01 08:00;4,5\n2026-06-01 08:01;6\n',
      {},
    ],
    ['no header', '2026-06-01T08:00:00,4.5\n2026-06-01T08:01:00,6\n', {}],
    ['UTC', 'Time,CO\n2026-06-01 06:00,4.5\n2026-06-01 06:01,6\n', { zone: 'UTC' }],
    ['offsets of their own', 'Time,CO\n2026-06-01T06:00:00Z,4.5\n2026-06-01T08:01:00+02:00,6\n', {}],
    [
      'a byte order mark and quotes',
      '\uFEFF"Time","CO"\r\n"2026-06-01 08:00","4.5"\r\n"2026-06-01 08:01","6"\r\n',
      {},
    ],
  ] as const)('with %s is read', async (_what, text, changes) => {
    const seen = await preview(text, changes)
    expect(seen.faults).toEqual([])
    expect(seen.sample.map(({ at, value }) => [at, value])).toEqual([
      ['2026-06-01T06:00:00.000Z', 4.5],
      ['2026-06-01T06:01:00.000Z', 6],
    ])
    expect(seen.peak).toBe(6)
  })

  test('every line that cannot be read is said, with its number, column and what stands there', async () => {
    const text = [
      'Time,CO',
      '2026-06-02 08:00,4',
      'yesterday,5',
      '2026-06-02 08:02,OL',
      '2026-06-02 08:03,',
      '2026-06-02 08:00,6',
      '2026-06-02 08:04,-3',
      '2099-06-02 08:05,3',
    ].join('\n')
    const seen = await preview(text)
    expect(seen).toMatchObject({ lineCount: 7, readingCount: 1, faultCount: 6 })
    expect(seen.faults.map(({ line, column, sentence }) => [line, column, sentence])).toEqual([
      [3, 'Time', 'Not a time with its date, year first.'],
      [4, 'CO', 'Not a number.'],
      [5, 'CO', 'No reading here.'],
      [6, 'Time', 'The same time stands on line 2.'],
      [7, 'CO', 'Not from 0 to 10000.'],
      [8, 'Time', 'This lies in the future.'],
    ])
    const refusal = await refusalOf(upload(text))
    expect(refusal.detail).toContain(
      'Line 3, Time: Not a time with its date, year first. (yesterday) and 5 more',
    )
    expect(refusal.fields).toHaveProperty('skipsFaulty')
    expect(await upload(text, { skipsFaulty: true })).toMatchObject({ readingCount: 1, skippedCount: 6 })
  })

  test('in another unit, without a time, or with columns that nobody can tell is refused in words', async () => {
    const refusal = async (text: string, changes: Partial<ExposureFile> = {}) =>
      (await refusalOf(preview(text, changes))).detail
    expect(await refusal('Time,CO mg/m3\n2026-06-01 08:00,4\n')).toContain('Let the meter write ppm')
    expect(await refusal('Time,Oxygen\n2026-06-01 08:00,20.9\n')).toContain(
      'Say which column has the reading',
    )
    expect(await refusal('Time,CO\n')).toContain('no line of readings')
    expect(await refusal('Time,CO\n"2026-06-01,4\n')).toContain('never closed')
    const odd = 'Time,Sensor 1,Sensor 2\n2026-06-01 08:00,4,9\n'
    expect(await refusal(odd, { columns: { value: 'Sensor 3' } })).toContain('no column “Sensor 3”')
    expect((await preview(odd, { columns: { value: 'Sensor 2' } })).peak).toBe(9)
  })

  test('that writes each second is kept by the minute, with its peak, and the peak meets the ceiling', async () => {
    const lines = Array.from({ length: 300 }, (_, i) => {
      const at = new Date(Date.UTC(2026, 5, 3, 6, 0, i)).toISOString()
      return `${at},${i === 130 ? 240 : 10}`
    })
    const kept = await upload(['Time,CO', ...lines].join('\n'), { subject: 'Hearth 3' })
    expect(kept.readingCount).toBe(5)
    const [standing] = (await day('2026-06-03')).carbonMonoxide
    expect(standing).toMatchObject({ subject: 'Hearth 3', readingCount: 5, peakPpm: 240 })
    expect(standing?.over).toMatchObject([{ kind: 'ceiling' }])
  })

  test('sent again by its id, or anew, adds nothing; taken back all its readings go with it', async () => {
    const text = 'Time,CO\n2026-06-04 08:00,4\n2026-06-04 09:00,6\n'
    const id = randomUUID()
    const first = await upload(text, { id })
    expect(await upload(text, { id })).toEqual(first)
    expect(await preview(text)).toMatchObject({ minuteCount: 2, alreadyThere: 2 })
    expect(await refusalOf(upload(text))).toMatchObject({ kind: 'conflict' })
    expect((await day('2026-06-04')).uploads).toMatchObject([{ id, fileName: 'meter.csv', readingCount: 2 }])
    await removeExposureFile(people.masterCooper.actor, { id, reason: 'The meter of another room' })
    const after = await day('2026-06-04')
    expect([after.uploads, after.carbonMonoxide]).toEqual([[], []])
    // What was taken back stands in nobody's way.
    expect(await upload(text)).toMatchObject({ readingCount: 2 })
  })

  test('of heat takes WBGT, or wet bulb and globe, in °C or °F', async () => {
    const wbgt = await preview('Time,WBGT\n2026-06-05 08:00,82.4\n', { kind: 'heat', temperatureUnit: 'F' })
    expect(wbgt.peak).toBeCloseTo(28, 9)
    const pair = await preview('Time;Tnw;Globe\n2026-06-05 08:00;22,0;40,0\n', { kind: 'heat' })
    expect(pair.peak).toBeCloseTo(27.4, 9)
  })

  test('one reading of it is not taken back alone, one by hand is', async () => {
    await upload('Time,CO\n2026-06-08 08:00,4\n')
    const [row] = await queryRows<{ id: string }>(
      await forkEm(),
      `select id from exposure_readings where at = '2026-06-08T06:00:00Z'`,
    )
    const refusal = await refusalOf(
      removeExposure(people.toaster.actor, { id: row?.id ?? '', reason: 'Wrong' }),
    )
    expect(refusal.detail).toContain('take the file back')
    const byHand = await exposure({ at: '2026-06-08T10:00:00Z' })
    await removeExposure(people.toaster.actor, { id: byHand.id, reason: 'Misread' })
    expect((await day('2026-06-08')).byHand).toEqual([])
  })
})

describe('the list of days', () => {
  test('has each day once, newest first, with what it lacks, and pages by its cursor', async () => {
    const whole = await listDays(people.administrator.actor, { limit: 50 })
    const days = whole.items.map((one) => one.day)
    expect(days).toEqual([...new Set(days)].sort().reverse())
    expect(days).toContain('2026-05-04')
    expect(whole.items.find((one) => one.day === '2026-05-04')).toMatchObject({
      carbonMonoxideCount: 9,
      peakPpm: 210,
      isOver: true,
      missing: [
        'No room temperature that day.',
        'No yard temperature that day.',
        'No WBGT reading that day.',
      ],
    })
    const paged: string[] = []
    let cursor: string | undefined
    do {
      const page = await listDays(people.administrator.actor, { limit: 4, cursor })
      paged.push(...page.items.map((one) => one.day))
      cursor = page.nextCursor ?? undefined
    } while (cursor !== undefined)
    expect(paged).toEqual(days)
  })
})

describe('the database', () => {
  test('holds that readings are taken back once and never changed', async () => {
    const { id } = await air('2026-06-20T08:00:00Z')
    const em = await forkEm()
    await expect(
      queryRows(em, 'update condition_readings set temp_c = 1 where id = ?', [id]),
    ).rejects.toThrow('taken back once')
    await removeAir(people.toaster.actor, { id, reason: 'Misread' })
    await expect(
      queryRows(em, `update condition_readings set removed_reason = 'other' where id = ?`, [id]),
    ).rejects.toThrow('taken back once')
    await expect(
      queryRows(
        em,
        `insert into exposure_readings (id, kind, subject, at, value, peak, account_id, recorded_at)
         values (gen_random_uuid(), 'heat', 'Room', now(), 30, 20, ?, now())`,
        [people.toaster.accountId],
      ),
    ).rejects.toThrow('exposure_readings_peak')
  })
})
