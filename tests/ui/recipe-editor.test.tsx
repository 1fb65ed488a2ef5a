import { cleanup, fireEvent, render, screen, waitFor, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { EditBench } from '@/components/recipes/edit-bench'
import { moveStage, readDraft, toDraft } from '@/components/recipes/editor-draft'
import { pasteStages } from '@/components/recipes/paste-stages'
import { pushHistory, redoHistory, undoHistory } from '@/components/recipes/use-history'
import { ToastProvider } from '@/components/ui/toast'
import { shownSentence } from '@/lib/recipes/shown-sentence'
import type { RecipeContent, RecipeVersionDto } from '@/lib/recipes/schema'
import { updateVersionSchema } from '@/lib/recipes/schema'
import { defaultSiteRules } from '@/lib/science/site-rules'
import { sampleContent } from '@/tests/support/recipe-content'

const router = vi.hoisted(() => ({ push: vi.fn(), replace: vi.fn(), refresh: vi.fn() }))
vi.mock('next/navigation', () => ({ useRouter: () => router }))
// A canvas needs a real browser; the journey looks at it. Here its inputs are read.
vi.mock('@/components/chart/pair', () => ({
  Pair: (props: { lead: { tempC: number[] } }) => (
    <output aria-label="plan">{props.lead.tempC.join(' ')}</output>
  ),
}))

const id = '3f1a4a34-9a3e-4d6f-8f7f-9e3f7d0f7f9e'

function versionOf(content: RecipeContent, revision = 1): RecipeVersionDto {
  const at = '2027-02-02T14:26:00.000Z'
  return {
    id,
    recipeId: '7d0f7f9e-3f1a-4a34-9a3e-0d6f0f7f9e3f',
    recipeName: 'Quay medium',
    number: 5,
    state: 'draft',
    revision,
    author: { id: '0d6f0f7f-3f1a-4a34-9a3e-9e3f7d0f7f9e', name: 'Cora Lind' },
    basedOnVersionId: null,
    content,
    planDoseMinutes: 9,
    targetDoseMinutes: 9,
    totalMinutes: 44,
    createdAt: at,
    updatedAt: at,
    sentAt: null,
    approvedAt: null,
    approvedBy: null,
    supersededAt: null,
    returnedAt: null,
    returnedBy: null,
    returnReason: null,
    withdrawnAt: null,
    withdrawnBy: null,
    withdrawReason: null,
    contentSha256: 'a'.repeat(64),
    signatures: [],
  }
}

type Sent = { method: string; url: string; body: unknown }
let sent: Sent[] = []
let answer: (call: Sent) => { status: number; body: unknown } = () => ({ status: 500, body: null })

/** A server that holds what was saved, as the real one would answer. */
function savingServer(call: Sent): { status: number; body: unknown } {
  const { revision, content } = updateVersionSchema.parse(call.body)
  return { status: 200, body: versionOf(content, revision + 1) }
}

beforeEach(() => {
  sent = []
  answer = savingServer
  vi.stubGlobal('Worker', undefined)
  vi.stubGlobal('fetch', async (url: string, init: { method: string; body?: string }) => {
    const call = { method: init.method, url, body: init.body === undefined ? null : JSON.parse(init.body) }
    sent.push(call)
    const { status, body } = answer(call)
    return new Response(JSON.stringify(body), { status, headers: { 'content-type': 'application/json' } })
  })
})
afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

function open(unit: 'C' | 'F' = 'C', content = sampleContent()) {
  render(
    <ToastProvider>
      <EditBench
        version={versionOf(content)}
        shadow={null}
        rules={defaultSiteRules}
        unit={unit}
        sub="From 4."
      />
    </ToastProvider>,
  )
  return userEvent.setup()
}

const cell = (name: string) => screen.getByRole<HTMLInputElement>('textbox', { name })
async function retype(user: ReturnType<typeof userEvent.setup>, name: string, text: string) {
  await user.clear(cell(name))
  // Typed on where the focus is: a second click would end the step of undo.
  await user.keyboard(text)
}

describe('the bench of a draft', () => {
  it('redraws the plan and its dose as one types, and saves exactly what stands there', async () => {
    const user = open()
    await retype(user, 'Climb, minutes', '12,5')
    expect(screen.getByText('47.5 min')).toBeTruthy()
    await user.keyboard('{Control>}s{/Control}')
    await waitFor(() => expect(sent).toHaveLength(1))
    const { revision, content } = updateVersionSchema.parse(sent[0]?.body)
    expect(revision).toBe(1)
    expect(content.stages[1]?.minutes).toBe(12.5)
    expect(content.stages[1]).toEqual({ ...sampleContent().stages[1], minutes: 12.5 })
    await screen.findAllByText(/Saved\./)
  })

  it('a hold follows the ramp before it, and becomes a ramp when another temperature is typed into it', async () => {
    const user = open()
    await retype(user, 'Climb, wood to, °C', '186')
    expect(cell('Hold, wood to, °C').value).toBe('186')
    expect(screen.getByLabelText('plan').textContent).toBe('60 150 186 186')
    await retype(user, 'Hold, wood to, °C', '190')
    await user.keyboard('{Control>}s{/Control}')
    await waitFor(() => expect(sent).toHaveLength(1))
    expect(updateVersionSchema.parse(sent[0]?.body).content.stages[2]).toMatchObject({
      kind: 'ramp',
      targetTempC: 190,
    })
  })

  it('shows and takes °F by the person’s unit, differences without the 32, and stores °C', async () => {
    const user = open('F')
    expect(cell('Warm, wood to, °F').value).toBe('302')
    expect(cell('Warm, band, °F').value).toBe('12.6')
    await retype(user, 'Warm, band, °F', '18')
    await user.keyboard('{Control>}s{/Control}')
    await waitFor(() => expect(sent).toHaveLength(1))
    const { content } = updateVersionSchema.parse(sent[0]?.body)
    expect(content.stages[0]?.bandC).toBe(10)
    expect(content.stages[0]?.targetTempC).toBe(150)
  })

  it('puts an error beside its field, by the server’s own schema, and sends nothing', async () => {
    const user = open()
    await retype(user, 'Warm, minutes', '2')
    await user.tab()
    expect(screen.getByText('Climbs faster than 12 °C a minute. Give it more time.')).toBeTruthy()
    await retype(user, 'Warm, what to do and when', 'fan at 3')
    await user.tab()
    expect(screen.getByText(/does not begin with an action/)).toBeTruthy()
    await user.keyboard('{Control>}s{/Control}')
    expect(sent).toHaveLength(0)
    expect(cell('Warm, what to do and when').value).toBe('fan at 3')
    await retype(user, 'Warm, minutes', '12')
    expect(screen.queryByText(/Climbs faster/)).toBeNull()
  })

  it('walks the table by Enter, moves a row by Alt and an arrow, adds one past the last', async () => {
    const user = open()
    await user.click(cell('Warm, minutes'))
    await user.keyboard('{Enter}')
    expect(document.activeElement).toBe(cell('Climb, minutes'))
    fireEvent.keyDown(cell('Climb, minutes'), { key: 'ArrowUp', altKey: true })
    // The focus goes along with the row, a frame later.
    await waitFor(() => expect(document.activeElement).toBe(cell('Climb, minutes')))
    const rows = within(screen.getByRole('table', { name: 'Stages of the fire' })).getAllByRole('row')
    expect(
      rows.slice(1).map((row) => within(row).getAllByRole<HTMLInputElement>('textbox')[0]?.value),
    ).toEqual(['Climb', 'Warm', 'Hold'])
    fireEvent.keyDown(cell('Hold, minutes'), { key: 'Enter' })
    expect(cell('Stage 4, minutes').value).toBe('5')
    await waitFor(() => expect(document.activeElement).toBe(cell('Stage 4, minutes')))
  })

  it('undoes a field that was typed in one step, and redoes it', async () => {
    const user = open()
    await retype(user, 'Rest, minutes', '25')
    await user.keyboard('{Control>}z{/Control}')
    expect(cell('Rest, minutes').value).toBe('10')
    await user.keyboard('{Control>}{Shift>}z{/Shift}{/Control}')
    expect(cell('Rest, minutes').value).toBe('25')
  })

  it('shows the caution in place when the wood may go above 230 °C', async () => {
    const user = open()
    expect(screen.queryByText(/can ignite/)).toBeNull()
    await retype(user, 'Wood never above, °C', '236')
    expect(screen.getByText(/Follow local code and the responsible person\./)).toBeTruthy()
  })

  it('asks which side to keep when somebody saved meanwhile, and loses neither', async () => {
    const user = open()
    const theirs = versionOf(sampleContent({ restMinutes: 30 }), 2)
    answer = (call) => {
      const { revision } = updateVersionSchema.parse(call.body)
      return revision === 1
        ? { status: 409, body: { title: 'Stale', detail: 'Somebody saved.', current: theirs } }
        : savingServer(call)
    }
    await retype(user, 'Rest, minutes', '25')
    await user.keyboard('{Control>}s{/Control}')
    const dialog = await screen.findByRole('dialog')
    expect(within(dialog).getByText('25 min')).toBeTruthy()
    expect(within(dialog).getByText('30 min')).toBeTruthy()
    await user.click(within(dialog).getByRole('button', { name: 'Keep mine' }))
    await waitFor(() => expect(sent).toHaveLength(2))
    expect(sent[1]?.body).toMatchObject({ revision: 2, content: { restMinutes: 25 } })
    await waitFor(() => expect(screen.queryByRole('dialog')).toBeNull())
  })

  it('taking theirs can be undone', async () => {
    const user = open()
    const theirs = versionOf(sampleContent({ restMinutes: 30 }), 2)
    answer = () => ({ status: 409, body: { title: 'Stale', detail: 'Somebody saved.', current: theirs } })
    await retype(user, 'Rest, minutes', '25')
    await user.keyboard('{Control>}s{/Control}')
    await user.click(await screen.findByRole('button', { name: 'Take theirs' }))
    expect(cell('Rest, minutes').value).toBe('30')
    await user.keyboard('{Control>}z{/Control}')
    expect(cell('Rest, minutes').value).toBe('25')
  })

  it('puts the server’s refusal of a review beside the field that it names', async () => {
    const user = open()
    answer = () => ({
      status: 422,
      body: {
        title: 'Something needs mending',
        detail: 'Too fine.',
        fields: { 'content.doseToleranceLog10': 'Ask for 0.09 or more.' },
      },
    })
    await user.click(screen.getByRole('button', { name: 'Send for review' }))
    expect(await screen.findAllByText(/Ask for 0\.09 or more\./)).not.toHaveLength(0)
    expect(cell('Tolerance, log10 of dose').getAttribute('aria-invalid')).toBe('true')
  })
})

describe('the draft behind the bench', () => {
  it('reads back as the content it was made from', () => {
    expect(readDraft(toDraft(sampleContent()))).toEqual({ content: sampleContent(), errors: null })
  })

  it('takes rows from a spreadsheet over and beyond the stages, heads passed over', () => {
    const text = 'Stage\tTo\tMin\tBand\tLid\tDo\nDry\t120\t10\t6\ton\tfeed at 2\nUp\t180\t10,5\t6\toff\t\n'
    const pasted = pasteStages(toDraft(sampleContent()), 2, text, 'C')
    expect(pasted.stages).toHaveLength(4)
    expect(pasted.stages[2]).toMatchObject({
      name: 'Dry',
      targetTempC: 120,
      minutes: 10,
      lid: 'on',
      kind: 'ramp',
    })
    expect(pasted.stages[3]).toMatchObject({
      name: 'Up',
      targetTempC: 180,
      minutes: 10.5,
      bandC: 6,
      lid: 'off',
    })
  })

  it('does nothing when a row would leave the table', () => {
    const draft = toDraft(sampleContent())
    expect(moveStage(draft, 0, -1)).toBe(draft)
    expect(moveStage(draft, 2, 1)).toBe(draft)
  })

  it('undo and redo are inverse', () => {
    const start = { past: [], present: 1, future: [], mergeKey: null }
    const changed = pushHistory(pushHistory(start, 2, 'a'), 3, 'b')
    expect(undoHistory(undoHistory(changed)).present).toBe(1)
    expect(redoHistory(redoHistory(undoHistory(undoHistory(changed)))).present).toBe(3)
    expect(pushHistory(changed, 4, 'b').past).toEqual([1, 2])
  })

  it('converts a sentence into °F by what its field holds', () => {
    expect(shownSentence('stages.0.targetTempC', 'Give a number from 0 to 280 °C.', 'F')).toBe(
      'Give a number from 32 to 536 °F.',
    )
    expect(shownSentence('stages.0.bandC', 'Give a number from 0.5 to 60 °C.', 'F')).toBe(
      'Give a number from 0.9 to 108 °F.',
    )
    expect(shownSentence('stages.0.minutes', 'Climbs faster than 12 °C a minute.', 'F')).toBe(
      'Climbs faster than 21.6 °F a minute.',
    )
  })
})
