import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { scoreFiring } from '@/lib/firings/score-firing'
import { closeIngestPool } from '@/lib/ingest/ingest-pool'
import { sealFiring } from '@/lib/ingest/seal-firing'
import { checkMarkerFormula } from '@/lib/markers/check-marker-formula'
import { fitMarkerResponse } from '@/lib/markers/fit-marker'
import { getMarker } from '@/lib/markers/get-marker'
import { listMarkers } from '@/lib/markers/list-markers'
import { predictMarkers } from '@/lib/markers/predict-markers'
import { previewMarkerFit } from '@/lib/markers/preview-marker-fit'
import { readAssayValue } from '@/lib/markers/read-assay-value'
import { readFitRows } from '@/lib/markers/read-fit-rows'
import { restsOn } from '@/lib/markers/response-words'
import { saveMarkerFormula } from '@/lib/markers/save-marker-formula'
import type { FitInput, FitResult } from '@/lib/markers/schema'
import { updateSiteSettings } from '@/lib/site/update-site-settings'
import { getSiteSettings } from '@/lib/site/get-site-settings'
import { planOf } from '@/lib/recipes/plan-of'
import type { RecipeContent } from '@/lib/recipes/schema'
import { setClock } from '@/lib/runtime'
import { checkCharacter37_36 } from '@/lib/science/identifier'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { playFiring } from '@/simulators/scenarios/play-firing'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import {
  approvedVersion,
  batchOf,
  checkedRoom,
  dayMs,
  refusalOf,
  shortContent,
} from '@/tests/support/firing-room'
import type { TestPeople } from '@/tests/support/people'
import { createPeople } from '@/tests/support/people'

let database: TestDatabase
let people: TestPeople
const system = { kind: 'system', name: 'sealing' } as const
const markerIds = new Map<string, string>()
/** Fired barrels in order of their dose, then one that waits. */
const serials: string[] = []
let waitingSerial = ''
let versionId = ''

const holds = [148, 156, 164, 172, 180, 188]

function content(holdC: number): RecipeContent {
  const short = shortContent()
  const [warm, climb, hold] = short.stages
  if (warm === undefined || climb === undefined || hold === undefined) throw new Error('three stages')
  return { ...short, stages: [warm, { ...climb, targetTempC: holdC }, { ...hold, targetTempC: holdC }] }
}

function idOf(key: string): string {
  const id = markerIds.get(key)
  if (id === undefined) throw new Error(`a marker ${key}`)
  return id
}

const terms = {
  family: 'line in log10 dose',
  unit: 'µg/g',
  matrix: 'toasted oak',
  extraction: 'model wine, 10 g/L, 14 days',
  samplePosition: 'bilge, stave 7',
  sampleFromMm: 0,
  sampleToMm: 2,
  place: { height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' },
} as const satisfies Omit<FitInput, 'rows'>

const doses = new Map<string, number>()

/** Invented results on a line in log10 of the dose, a little off it; the incomplete barrel has no dose. */
function resultOf(serial: string, i: number): string {
  return (6 + 3 * Math.log10(doses.get(serial) ?? 1) + 0.2 * ((i % 3) - 1)).toFixed(2)
}

const risingRows = () => serials.map((serial, i) => `${serial}\t${resultOf(serial, i)}`).join('\n')

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  const [hearth] = await checkedRoom(people, 1)
  if (hearth === undefined) throw new Error('a hearth')
  for (const [index, holdC] of holds.entries()) {
    const id = await approvedVersion(people, `Hold ${holdC}`, content(holdC))
    const [piece, waiting] = await batchOf(people, id, 2)
    if (piece === undefined || waiting === undefined) throw new Error('two pieces')
    const { firing } = await playFiring({
      pieceId: piece.id,
      hearthId: hearth.id,
      toaster: people.toaster.actor,
      startAt: new Date(Date.now() - dayMs + index * 3_600_000),
      content: content(holdC),
      gateway: hearth.gateway,
      probeIds: hearth.probeIds,
      engine: { seed: 70 + index, moisturePercent: 20, skill: 0.95 },
      finish: { colour: '', smell: '', outsideTempC: 60, remarks: '' },
      // The last one has a gap that is too long to be joined.
      ...(index === 5 ? { gap: { fromToastS: 200, forS: 250 } } : {}),
    })
    setClock(null)
    await sealFiring(firing.id)
    await scoreFiring(system, { id: firing.id })
    serials.push(piece.serial)
    waitingSerial = waiting.serial
    if (holdC === 148) versionId = id
  }
  for (const marker of (await listMarkers(people.chemist.actor)).items) markerIds.set(marker.key, marker.id)
  const { rows } = await previewMarkerFit(people.chemist.actor, {
    ...terms,
    id: idOf('vanillin'),
    rows: serials.map((serial) => `${serial}\t1`).join('\n'),
  })
  for (const { result } of rows) if (result?.serial) doses.set(result.serial, result.doseMin ?? 1)
}, 180_000)

afterAll(async () => {
  setClock(null)
  await closeIngestPool()
  await closeOrm()
  await database.drop()
})

describe('the list of markers', () => {
  it('begins with the nine of the product, in order, without a response', async () => {
    const { items } = await listMarkers(people.administrator.actor)
    expect(items.map((marker) => marker.key)).toEqual([
      'cis_lactone',
      'trans_lactone',
      'eugenol',
      'isoeugenol',
      'vanillin',
      'syringaldehyde',
      'guaiacol',
      'methylguaiacol',
      'furfural',
    ])
    expect(items.every((marker) => marker.unit === 'µg/g' && marker.response === null)).toBe(true)
  })

  it('is for chemist, master cooper and administrator; the last one reads only; a missing one is not found', async () => {
    const id = idOf('vanillin')
    for (const person of [people.toaster, people.customer]) {
      expect((await refusalOf(listMarkers(person.actor))).kind).toBe('not allowed')
      expect((await refusalOf(getMarker(person.actor, { id }))).kind).toBe('not allowed')
      expect((await refusalOf(predictMarkers(person.actor, { id: versionId }))).kind).toBe('not allowed')
    }
    const formula = { id, formula: '1', unit: 'µg/g', note: '', seenNumber: 0 } as const
    for (const person of [people.administrator, people.toaster, people.customer]) {
      expect((await refusalOf(saveMarkerFormula(person.actor, formula))).kind).toBe('not allowed')
      expect((await refusalOf(checkMarkerFormula(person.actor, formula))).kind).toBe('not allowed')
      const fit = { ...terms, id, rows: risingRows() }
      expect((await refusalOf(previewMarkerFit(person.actor, fit))).kind).toBe('not allowed')
      expect(
        (await refusalOf(fitMarkerResponse(person.actor, { ...fit, note: '', seenNumber: 0 }))).kind,
      ).toBe('not allowed')
    }
    const missing = { id: '7d0f7f9e-3f1a-4a34-9a3e-0d6f0f7f9e3f' }
    expect((await refusalOf(getMarker(people.chemist.actor, missing))).kind).toBe('not found')
  })
})

describe('a formula', () => {
  it('is checked as one types: a fault with its place, or what it gives for approved recipes', async () => {
    const id = idOf('guaiacol')
    const check = (formula: string) => checkMarkerFormula(people.chemist.actor, { id, formula, unit: 'µg/g' })
    expect(await check('2 * vanilin')).toEqual({
      ok: false,
      fault: { message: expect.stringContaining('vanilin'), index: 4, length: 7 },
    })
    const checked = await check('2*log10_dose+3')
    if (!checked.ok) throw new Error(checked.fault.message)
    expect(checked.formula).toBe('2 * log10_dose + 3')
    expect(checked.isPureNumber).toBe(true)
    expect(checked.examples.map((example) => example.recipeName)).toEqual(
      holds.map((holdC) => `Hold ${holdC}`),
    )
    checked.examples.forEach((example, i) => {
      const plan = planOf(content(holds[i] ?? 0), defaultSiteRules.dose)
      expect(example.value).toBeCloseTo(2 * Math.log10(plan.doseMin) + 3, 10)
    })
    const fourth = await check('stage_minutes(4) / minute')
    expect(fourth.ok && fourth.examples.every((example) => example.reason?.includes('no stage 4'))).toBe(true)
  })

  it('is stored in its plain form with the next number, and not twice; audit says who and what', async () => {
    const id = idOf('guaiacol')
    const save = (formula: string, seenNumber: number) =>
      saveMarkerFormula(people.chemist.actor, {
        id,
        formula,
        unit: 'µg/g',
        note: 'after tasting',
        seenNumber,
      })
    const first = await save('2*log10_dose', 0)
    expect(first.response).toMatchObject({
      kind: 'formula',
      number: 1,
      formula: '2 * log10_dose',
      author: 'Cora Lind',
    })
    expect((await save('2 * log10_dose', 1)).responses).toHaveLength(1)
    const second = await save('3 * log10_dose', 1)
    expect(second.responses.map((response) => response.number)).toEqual([2, 1])
    const stale = await refusalOf(save('4 * log10_dose', 1))
    expect(stale).toMatchObject({
      kind: 'stale',
      detail: expect.stringContaining('Cora Lind wrote response 2'),
    })
    const wrong = await refusalOf(save('4 * dose', 2))
    expect(wrong).toMatchObject({
      kind: 'invalid',
      fields: { formula: expect.stringContaining('At letter 1: This gives min') },
    })
    const entries = await queryRows<{ action: string; actor_name: string; detail: { number: number } }>(
      await forkEm(),
      `select action, actor_name, detail from audit_entries where subject_id = ? order by seq`,
      [id],
    )
    expect(entries.map((entry) => [entry.action, entry.actor_name, entry.detail.number])).toEqual([
      ['marker formula written', 'Cora Lind', 1],
      ['marker formula written', 'Cora Lind', 2],
    ])
  })

  it('predicts without an interval, says that nothing is behind it, and asks for the lot’s assay where it needs one', async () => {
    const { predictions } = await predictMarkers(people.chemist.actor, { id: versionId })
    const dose = planOf(content(148), defaultSiteRules.dose).doseMin
    const guaiacol = predictions.find((one) => one.marker.key === 'guaiacol')
    expect(guaiacol?.interval).toBeNull()
    expect(guaiacol?.restsOn).toContain('no data behind it')
    // 3·log10 of a dose below 1 min is below nothing.
    expect(dose).toBeLessThan(1)
    expect(guaiacol).toMatchObject({ value: null, refusal: expect.stringContaining('below nothing') })
    const id = idOf('eugenol')
    await saveMarkerFormula(people.masterCooper.actor, {
      id,
      formula: 'lot_eugenol * (1 + dose / (10 * minute))',
      unit: 'µg/g',
      note: '',
      seenNumber: 0,
    })
    const without = await predictMarkers(people.chemist.actor, { id: versionId })
    expect(without.lotAssays).toEqual([{ key: 'eugenol', name: 'Eugenol', unit: 'µg/g' }])
    expect(without.predictions.find((one) => one.marker.key === 'eugenol')?.refusal).toContain(
      'give its assay',
    )
    const given = await predictMarkers(people.chemist.actor, { id: versionId, lot: 'eugenol:2' })
    expect(given.predictions.find((one) => one.marker.key === 'eugenol')?.value).toBeCloseTo(
      2 * (1 + dose / 10),
      10,
    )
    expect(without.without).toHaveLength(7)
  })
})

describe('pasted results', () => {
  it('keep both decimal marks and a limit as a limit; nothing is read as zero', () => {
    expect(readAssayValue('12.5')).toEqual({ value: 12.5, isBelowLimit: false })
    expect(readAssayValue(' 12,5 ')).toEqual({ value: 12.5, isBelowLimit: false })
    expect(readAssayValue('<0.5')).toEqual({ value: 0.5, isBelowLimit: true })
    expect(readAssayValue('< 0,5')).toEqual({ value: 0.5, isBelowLimit: true })
    for (const typed of ['', '0', '<0', '-1', 'n.d.', '<LOD', '1.234,5', 'trace', '<', '3 4 x']) {
      expect(readAssayValue(typed), typed).toHaveProperty('error')
    }
  })

  it('come with tabs, semicolons or spaces, with a head and empty lines; each fault is said in its row', () => {
    const valid = serials[0] ?? ''
    const text = `Barrel\tVanillin\n\n${valid}\t<0,5\n12,5 min;3\n7 4\nTST-0001-0\t3\nno barrel\t3\n${valid.toLowerCase()}\t4\n5\t6\t7\n8`
    const { rows } = readFitRows(text)
    expect(rows.map((row) => [row.line, row.error?.split(/[:,.]/)[0] ?? null])).toEqual([
      [3, null],
      [4, null],
      [5, null],
      [6, 'The check character of TST-0001-0 does not fit'],
      [7, '“no barrel” is neither a barrel’s serial nor a dose in minutes'],
      [8, 'This barrel stands in line 3 already'],
      [9, 'Two columns are needed'],
      [10, 'Two columns are needed'],
    ])
    expect(rows[1]).toMatchObject({ source: { doseMin: 12.5 }, value: { value: 3 }, typedValue: '3' })
    expect(readFitRows('1 2\n'.repeat(301)).tooMany).toBe(true)
  })

  it('find the toast of each barrel; what cannot be used says why, and then there is no fit', async () => {
    const preview = (rows: string, more: Partial<FitInput> = {}) =>
      previewMarkerFit(people.chemist.actor, { ...terms, id: idOf('vanillin'), rows, ...more })
    const { rows, outcome } = await preview(
      `${serials[0]}\t3\n${serials[5]}\t4\n${waitingSerial}\t5\nABC-1234-${checkCharacter37_36('ABC-1234')}\t3`,
    )
    expect(outcome).toBeNull()
    expect(rows[0]?.result?.doseMin).toBeGreaterThan(0)
    expect(rows[0]?.result?.toastDepthMm).not.toBeNull()
    expect(rows[1]?.error).toContain('is incomplete')
    expect(rows[2]?.error).toContain('has no finished firing yet')
    expect(rows[3]?.error).toContain('There is no barrel or head')
    const elsewhere = await preview(`${serials[0]}\t3`, { place: { ...terms.place, depthMm: 4 } })
    expect(elsewhere.rows[0]?.error).toContain('not the place of this fit')
    const depth = await preview('5\t3', { family: 'line in toast depth' })
    expect(depth.rows[0]?.error).toContain('A typed dose has no toast depth')
    const none = await preview('0\t3')
    expect(none.rows[0]?.error).toContain('no logarithm')
    expect((await refusalOf(preview(' \n '))).fields).toHaveProperty('rows')
    const few = await preview(
      serials
        .slice(0, 4)
        .map((serial) => `${serial} 3`)
        .join('\n'),
    )
    expect(few.outcome).toMatchObject({ ok: false, refusal: expect.stringContaining('too few') })
  })
})

describe('a fit', () => {
  const fit = (rows: string, seenNumber: number, more: Partial<FitInput> = {}) =>
    fitMarkerResponse(people.masterCooper.actor, {
      ...terms,
      ...more,
      id: idOf('vanillin'),
      rows,
      note: 'invented',
      seenNumber,
    })
  const usable = () => risingRows().split('\n').slice(0, 5).join('\n')

  it('is refused with rows that cannot be used, each named, and where the data do not support it', async () => {
    const withGap = await refusalOf(fit(risingRows(), 0))
    expect(withGap).toMatchObject({
      kind: 'invalid',
      fields: { 'rows.6': expect.stringContaining('incomplete') },
    })
    const flat = serials.slice(0, 5).map((serial, i) => `${serial}\t${[3, 3.4, 2.9, 3.3, 3][i]}`)
    expect((await refusalOf(fit(flat.join('\n'), 0))).detail).toContain('do not show that it changes')
    expect((await getMarker(people.chemist.actor, { id: idOf('vanillin') })).responses).toEqual([])
  })

  it('is stored with its results as typed, what was assayed and how, and predicts with interval and what is behind it', async () => {
    const made = await fit(`${usable()}\n0,2\t<3,5`, 0)
    if (made.response?.kind !== 'fit') throw new Error('a fit')
    const { picture } = made.response
    expect(picture.fit).toMatchObject({ method: 'maximum likelihood', count: 6, belowLimitCount: 1 })
    expect(picture.results.at(-1)).toMatchObject({
      typedSource: '0,2',
      typedValue: '<3,5',
      value: 3.5,
      isBelowLimit: true,
    } satisfies Partial<FitResult>)
    expect(made.response).toMatchObject({
      matrix: 'toasted oak',
      sampleToMm: 2,
      place: terms.place,
      siteSettingsVersion: 1,
    })
    expect(picture.curve).toHaveLength(61)
    expect(restsOn(made.response)).toMatch(/^5 barrels, 1 typed dose, dose .* to .* min, 1 below the limit$/)
    const { predictions } = await predictMarkers(people.administrator.actor, { id: versionId })
    const vanillin = predictions.find((one) => one.marker.key === 'vanillin')
    expect(vanillin?.refusal).toBeNull()
    expect(vanillin?.interval?.low).toBeLessThan(vanillin?.value ?? 0)
    expect(vanillin?.interval?.high).toBeGreaterThan(vanillin?.value ?? Infinity)
    expect(vanillin?.restsOn).toBe(restsOn(made.response))
  })

  it('predicts nothing outside its results, at another place, or under other site rules', async () => {
    const refusalFor = async (name: string, changed: RecipeContent) => {
      const id = await approvedVersion(people, name, changed)
      const { predictions } = await predictMarkers(people.chemist.actor, { id })
      return predictions.find((one) => one.marker.key === 'vanillin')?.refusal
    }
    expect(await refusalFor('Far hotter', content(214))).toMatch(
      /^A dose of .* lies outside the .* that the results cover/,
    )
    const deeper = { ...content(164), leadPlace: { ...content(164).leadPlace, depthMm: 4 } }
    expect(await refusalFor('Read deeper', deeper)).toContain('rests on doses read at bilge A, 2 mm, wedge')
    const { version, name, serialPrefix, timeZone, rules, room } = await getSiteSettings(
      people.administrator.actor,
    )
    const otherRules = { ...rules, dose: { ...rules.dose, zC: 30 } }
    await updateSiteSettings(people.administrator.actor, {
      version,
      name,
      serialPrefix,
      timeZone,
      rules: otherRules,
      room,
    })
    const { predictions } = await predictMarkers(people.chemist.actor, { id: versionId })
    expect(predictions.find((one) => one.marker.key === 'vanillin')?.refusal).toContain('other site rules')
    const preview = await previewMarkerFit(people.chemist.actor, {
      ...terms,
      id: idOf('vanillin'),
      rows: usable(),
    })
    expect(preview.rows[0]?.error).toContain('scored by other site rules')
  })
})

describe('the database holds', () => {
  const columns = `marker_id, number, kind, unit, formula, site_settings_version, author_id, created_at`
  const insert = async (number: number, kind: string, formula: string | null) =>
    queryRows(
      await forkEm(),
      `insert into marker_responses (${columns}) values (?, ?, ?, 'µg/g', ?, 1, ?, now())`,
      [idOf('furfural'), number, kind, formula, people.chemist.accountId],
    )

  it('that responses are numbered without a hole and never changed', async () => {
    await expect(insert(2, 'formula', '1')).rejects.toThrow(/number 1/)
    await insert(1, 'formula', '1')
    await expect(insert(1, 'formula', '2')).rejects.toThrow(/number 2/)
    const em = await forkEm()
    for (const sql of [`update marker_responses set formula = '9'`, 'delete from marker_responses']) {
      await expect(queryRows(em, sql)).rejects.toThrow()
    }
    await expect(queryRows(em, `update markers set unit = 'mg/g'`)).rejects.toThrow(/permission denied/)
  })

  it('that a response is whole: a formula without text, a fit without its results, an unknown kind', async () => {
    await expect(insert(2, 'formula', null)).rejects.toThrow(/one_kind/)
    await expect(insert(2, 'fit', null)).rejects.toThrow(/one_kind/)
    await expect(insert(2, 'fit', '1')).rejects.toThrow(/one_kind/)
    await expect(insert(2, 'guess', '1')).rejects.toThrow(/kind_check/)
  })
})
