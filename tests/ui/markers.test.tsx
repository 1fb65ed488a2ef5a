import { cleanup, render, screen, waitFor, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import fc from 'fast-check'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { FitPanel } from '@/components/markers/fit-panel'
import { FitPlot } from '@/components/markers/fit-plot'
import { FormulaEditor } from '@/components/markers/formula-editor'
import { roundTicks } from '@/components/chart/round-ticks'
import { linearScale, logScale } from '@/components/markers/plot-scale'
import { PredictionTable } from '@/components/markers/prediction-table'
import { ToastProvider } from '@/components/ui/toast'
import { fitResults, toFitPicture } from '@/lib/markers/fit-picture'
import { restsOn } from '@/lib/markers/response-words'
import type { FitPicture, FitPreview, FitResult, MarkerResponseDto } from '@/lib/markers/schema'
import {
  checkFormulaSchema,
  fitMarkerSchema,
  previewFitSchema,
  saveFormulaSchema,
} from '@/lib/markers/schema'
import { compileFormula } from '@/lib/science/formula'
import { formulaFunctions, formulaSymbols } from '@/lib/science/formula-symbols'

const router = vi.hoisted(() => ({ push: vi.fn(), replace: vi.fn(), refresh: vi.fn() }))
vi.mock('next/navigation', () => ({ useRouter: () => router, usePathname: () => '/recipe-versions/1' }))

const id = '3f1a4a34-9a3e-4d6f-8f7f-9e3f7d0f7f9e'

type Sent = { url: string; body: unknown }
let sent: Sent[] = []
let answer: (call: Sent) => { status: number; body: unknown } = () => ({ status: 500, body: null })

beforeEach(() => {
  sent = []
  vi.clearAllMocks()
  vi.stubGlobal('fetch', async (url: string, init: { body?: string }) => {
    const call = { url, body: init.body === undefined ? null : JSON.parse(init.body) }
    sent.push(call)
    const { status, body } = answer(call)
    return new Response(JSON.stringify(body), { status, headers: { 'content-type': 'application/json' } })
  })
})
afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

/** Reads formulas as the server does, and takes what is saved. */
function formulaServer({ url, body }: Sent): { status: number; body: unknown } {
  if (url.endsWith('/formulas')) {
    const { seenNumber } = saveFormulaSchema.parse(body)
    return { status: 201, body: { response: { number: seenNumber + 1 } } }
  }
  const { formula, unit } = checkFormulaSchema.parse(body)
  const compiled = compileFormula(formula, { unit })
  if (!compiled.ok) return { status: 200, body: compiled }
  const { text, isPureNumber } = compiled
  const examples = [{ versionId: id, recipeName: 'Quay medium', versionNumber: 4, value: 4.2, reason: null }]
  return { status: 200, body: { ok: true, formula: text, unit, isPureNumber, examples } }
}

const inForce: MarkerResponseDto = {
  id,
  number: 2,
  kind: 'formula',
  unit: 'µg/g',
  formula: '2 * log10_dose',
  note: '',
  author: 'Cora Lind',
  createdAt: '2027-02-02T14:26:00.000Z',
}

function openEditor(formula = '') {
  answer = formulaServer
  render(
    <ToastProvider>
      <FormulaEditor
        markerId={id}
        unit="µg/g"
        formula={formula}
        inForce={inForce}
        symbols={formulaSymbols}
        functions={formulaFunctions}
      />
    </ToastProvider>,
  )
  return userEvent.setup()
}

const field = () => screen.getByRole<HTMLTextAreaElement>('textbox', { name: 'Formula' })
const save = () => screen.getByRole<HTMLButtonElement>('button', { name: 'Put this formula in force' })

describe('the formula editor', () => {
  it('asks the server after a pause, once for many letters, and points at the fault under the field', async () => {
    const user = openEditor()
    await user.type(field(), '1 + dose')
    expect(await screen.findByText(/^Letter 1: Units do not agree/)).toBeTruthy()
    expect(sent.length).toBeLessThan(8)
    expect(document.querySelector('mark')?.textContent).toBe('1 + dose')
    expect(field().getAttribute('aria-invalid')).toBe('true')
    expect(save().disabled).toBe(true)
    await user.type(field(), ' / minute')
    expect(await screen.findByText('Read as 1 + dose / minute, a number that is taken as µg/g.')).toBeTruthy()
    expect(document.querySelector('mark')).toBeNull()
    expect(screen.getByText('Quay medium, version 4')).toBeTruthy()
    expect(save().disabled).toBe(false)
  })

  it('puts a name where the cursor stands', async () => {
    const user = openEditor('2 * ')
    await user.click(field())
    field().setSelectionRange(4, 4)
    await user.click(screen.getByRole('button', { name: 'log10_dose' }))
    expect(field().value).toBe('2 * log10_dose')
  })

  it('stores with the response that was seen, and keeps what was typed when another was written meanwhile', async () => {
    const user = openEditor()
    await user.type(field(), '3 * log10_dose')
    await waitFor(() => expect(save().disabled).toBe(false))
    answer = (call) =>
      call.url.endsWith('/formulas')
        ? {
            status: 409,
            body: { title: 'Somebody changed this meanwhile', detail: 'Response 3 was written.' },
          }
        : formulaServer(call)
    await user.click(save())
    expect(await screen.findByText('Response 3 was written.')).toBeTruthy()
    expect(field().value).toBe('3 * log10_dose')
    expect(router.refresh).toHaveBeenCalled()
    answer = formulaServer
    await user.click(save())
    await waitFor(() => expect(router.push).toHaveBeenCalledWith(`/markers/${id}`))
    expect(sent.at(-1)?.body).toMatchObject({ formula: '3 * log10_dose', unit: 'µg/g', seenNumber: 2 })
  })

  it('does not store what is in force already', async () => {
    openEditor('2 * log10_dose')
    expect(await screen.findByText(/This is the response in force\./)).toBeTruthy()
    expect(save().disabled).toBe(true)
  })
})

function resultsOf(values: readonly number[]): FitResult[] {
  return values.map((value, i) => ({
    line: i + 1,
    typedSource: `SML-${i}`,
    typedValue: String(value),
    serial: `SML-${i}`,
    firingId: id,
    doseMin: 2 ** i,
    slowIndexMin: 3 * 2 ** i,
    fastIndexMin: 1 + ((i * 3) % 5),
    toastDepthMm: 4 + i,
    value,
    isBelowLimit: i === 0,
  }))
}

function pictureOf(): FitPicture {
  const results = resultsOf([1, 2.2, 3.1, 3.9, 5.2, 6.1, 6.9])
  const outcome = fitResults('line in log10 dose', results)
  if (!outcome.ok) throw new Error(outcome.refusal)
  return toFitPicture(outcome.fit, results)
}

function previewServer(preview: FitPreview) {
  return ({ url, body }: Sent) => {
    if (url.endsWith('/fits')) {
      fitMarkerSchema.parse(body)
      return { status: 201, body: { response: { number: 1 } } }
    }
    previewFitSchema.parse(body)
    return { status: 200, body: preview }
  }
}

function openPanel() {
  render(
    <ToastProvider>
      <FitPanel
        marker={{ id, name: 'Vanillin', unit: 'µg/g' }}
        seenNumber={0}
        start={null}
        usualPlace={{ height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' }}
      />
    </ToastProvider>,
  )
  return userEvent.setup()
}

async function fill(user: ReturnType<typeof userEvent.setup>) {
  await user.type(screen.getByLabelText('Matrix'), 'Toasted oak')
  await user.type(screen.getByLabelText('Extraction'), 'Model wine')
  await user.type(screen.getByLabelText('Sample taken at'), 'Bilge')
  await user.type(screen.getByLabelText('Down to'), '2')
  await user.click(screen.getByRole('textbox', { name: 'Results' }))
  await user.paste('SML-0\t<1\nSML-1\t2,2')
}

const store = () => screen.getByRole<HTMLButtonElement>('button', { name: 'Put this fit in force' })

describe('the fit panel', () => {
  const rowsOf = (picture: FitPicture) =>
    picture.results.map((result) => ({
      line: result.line,
      typedSource: result.typedSource,
      typedValue: result.typedValue,
      result,
      error: null,
    }))

  it('shows what is wrong with a row beside it, and stores nothing while one is wrong', async () => {
    const [first] = rowsOf(pictureOf())
    if (first === undefined) throw new Error('a row')
    const wrong = { ...first, line: 2, typedSource: 'SML-9', result: null, error: 'There is no barrel SML9.' }
    answer = previewServer({ rows: [first, wrong], outcome: null })
    const user = openPanel()
    await fill(user)
    await user.click(screen.getByRole('button', { name: 'Look at the fit' }))
    const row = (await screen.findByText('There is no barrel SML9.')).closest('tr')
    expect(row?.textContent).toContain('SML-9')
    expect(screen.getByText('One row to mend or take out.')).toBeTruthy()
    expect(store().disabled).toBe(true)
    expect(sent[0]?.body).toMatchObject({
      rows: 'SML-0\t<1\nSML-1\t2,2',
      sampleToMm: 2,
      family: 'line in log10 dose',
    })
  })

  it('says a refusal in its own words', async () => {
    answer = previewServer({
      rows: rowsOf(pictureOf()),
      outcome: { ok: false, refusal: 'These results do not show a fall.' },
    })
    const user = openPanel()
    await fill(user)
    await user.click(screen.getByRole('button', { name: 'Look at the fit' }))
    expect(await screen.findByText('These results do not show a fall.')).toBeTruthy()
    expect(store().disabled).toBe(true)
  })

  it('draws curve, residuals and parameters with intervals, and stores only what was looked at', async () => {
    const picture = pictureOf()
    answer = previewServer({ rows: rowsOf(picture), outcome: { ok: true, picture } })
    const user = openPanel()
    await fill(user)
    await user.click(screen.getByRole('button', { name: 'Look at the fit' }))
    expect(
      await screen.findByRole('img', { name: /Vanillin against dose: 7 results, 1 of them below/ }),
    ).toBeTruthy()
    expect(screen.getByRole('img', { name: /Residuals of 6 measured results/ })).toBeTruthy()
    const parameters = screen.getByRole('table', { name: 'Parameters of the fit' })
    expect(within(parameters).getAllByRole('row')).toHaveLength(3)
    expect(store().disabled).toBe(false)
    await user.type(screen.getByRole('textbox', { name: 'Results' }), '\nSML-2\t3')
    expect(screen.getByText('Changed since the preview: look again.')).toBeTruthy()
    expect(store().disabled).toBe(true)
    await user.click(screen.getByRole('button', { name: 'Look again' }))
    await waitFor(() => expect(store().disabled).toBe(false))
    await user.click(store())
    await waitFor(() => expect(router.push).toHaveBeenCalledWith(`/markers/${id}`))
    expect(sent.at(-1)?.body).toMatchObject({ seenNumber: 0, note: '' })
  })
})

describe('the plots', () => {
  it('show each result once: measured ones as dots, those below a limit as stems', () => {
    const { container } = render(<FitPlot picture={pictureOf()} name="Vanillin" unit="µg/g" />)
    expect(container.querySelectorAll('circle')).toHaveLength(6)
    expect(container.querySelectorAll('path[d*="h10M"]')).toHaveLength(1)
    expect(container.innerHTML).not.toContain('NaN')
  })

  it('of two predictors show measured against fitted', () => {
    const results = resultsOf([1, 2.2, 3.1, 3.9, 5.2, 6.1, 6.9, 7.7]).map((one, i) => ({
      ...one,
      isBelowLimit: false,
      value:
        2 + 3 * Math.log10(one.slowIndexMin ?? 1) - 2 * Math.log10(one.fastIndexMin ?? 1) + 0.05 * (i % 3),
    }))
    const outcome = fitResults('plane in log10 indices', results)
    if (!outcome.ok) throw new Error(outcome.refusal)
    const picture = toFitPicture(outcome.fit, results)
    expect(picture.curve).toEqual([])
    const { container } = render(<FitPlot picture={picture} name="Vanillin" unit="µg/g" />)
    expect(container.querySelectorAll('circle')).toHaveLength(8)
    expect(container.textContent).toContain('both agree')
  })

  it('law: ticks are inside, evenly apart, few, and an axis keeps the order', () => {
    const number = fc.double({ min: -1e4, max: 1e4, noNaN: true })
    fc.assert(
      fc.property(
        number,
        fc.double({ min: 1e-3, max: 1e4, noNaN: true }),
        fc.integer({ min: 2, max: 8 }),
        (low, span, most) => {
          const ticks = roundTicks(low, low + span, most)
          expect(ticks.length).toBeLessThanOrEqual(most + 1)
          for (const tick of ticks) {
            expect(tick).toBeGreaterThanOrEqual(low - 1e-6 * span)
            expect(tick).toBeLessThanOrEqual(low + span + 1e-6 * span)
          }
          const { toPx } = linearScale([low, low + span], 0, 100)
          expect(toPx(low)).toBeGreaterThanOrEqual(0)
          expect(toPx(low + span)).toBeGreaterThan(toPx(low))
          expect(toPx(low + span)).toBeLessThanOrEqual(100)
        },
      ),
      { seed: 20_260_101, numRuns: 200 },
    )
    expect(logScale([1.4, 35], 0, 100).ticks).toEqual([2, 5, 10, 20])
    expect(logScale([0.002, 900], 0, 100).ticks).toEqual([0.01, 0.1, 1, 10, 100])
  })
})

describe('the markers of a recipe version', () => {
  const response: MarkerResponseDto = {
    id,
    number: 1,
    kind: 'fit',
    unit: 'µg/g',
    note: '',
    author: 'Cora Lind',
    createdAt: '2027-02-02T14:26:00.000Z',
    picture: pictureOf(),
    matrix: 'Toasted oak',
    extraction: 'Model wine',
    samplePosition: 'Bilge',
    sampleFromMm: 0,
    sampleToMm: 2,
    place: { height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' },
    siteSettingsVersion: 1,
  }
  const marker = { id, key: 'vanillin', name: 'Vanillin' }
  const base = { unit: 'µg/g', number: 1 } as const

  it('show a fit’s interval and what is behind it, a formula’s lack of one, and a refusal instead of a figure', () => {
    render(
      <PredictionTable
        isDraft={false}
        lot=""
        markers={{
          predictions: [
            {
              ...base,
              marker,
              kind: 'fit',
              value: 4.321,
              interval: { low: 3.1, high: 5.6 },
              refusal: null,
              restsOn: restsOn(response),
            },
            {
              ...base,
              marker: { ...marker, id: '2', name: 'Eugenol' },
              kind: 'formula',
              value: 2,
              interval: null,
              refusal: null,
              restsOn: 'a formula: no data behind it, and so no interval',
            },
            {
              ...base,
              marker: { ...marker, id: '3', name: 'Guaiacol' },
              kind: 'fit',
              value: null,
              interval: null,
              refusal: 'Outside the results.',
              restsOn: '14 barrels',
            },
          ],
          without: ['Furfural'],
          lotAssays: [],
        }}
      />,
    )
    const rows = screen.getAllByRole('row').map((row) => row.textContent)
    expect(rows[1]).toBe('Vanillin4.323.1 to 5.6µg/g7 barrels, dose 1 to 64 min, 1 below the limit')
    expect(rows[2]).toBe('Eugenol2noneµg/gA formula: no data behind it, and so no interval')
    expect(rows[3]).toBe('Guaiacolµg/gNot predicted. Outside the results.14 barrels')
    expect(screen.getByText('Without a response: Furfural.')).toBeTruthy()
  })

  it('take a lot’s assays from the person and keep them in the address', async () => {
    const lotAssays = [{ key: 'eugenol', name: 'Eugenol', unit: 'µg/g' as const }]
    const predictions = [
      {
        ...base,
        marker,
        kind: 'formula' as const,
        value: null,
        interval: null,
        refusal: 'Give its assay.',
        restsOn: 'a formula',
      },
    ]
    render(<PredictionTable isDraft lot="" markers={{ predictions, without: [], lotAssays }} />)
    const user = userEvent.setup()
    await user.type(screen.getByLabelText('Eugenol of the lot before the fire'), '2,5')
    await user.click(screen.getByRole('button', { name: 'Predict with these' }))
    expect(router.replace).toHaveBeenCalledWith('/recipe-versions/1?lot=eugenol%3A2.5', { scroll: false })
  })
})
