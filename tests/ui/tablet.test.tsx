import { act, cleanup, fireEvent, render, screen, waitFor } from '@testing-library/react'
import fc from 'fast-check'
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest'
import { nextFigures, PinPad } from '@/components/devices/pin-pad'
import { WhoPanel } from '@/components/devices/who-panel'
import type { WhoPanelProps } from '@/components/devices/who-panel'
import { topLineOf } from '@/components/live/fireside-lines'
import {
  addToQueue,
  nextToSend,
  parseQueue,
  printQueue,
  waitingForOthers,
} from '@/components/live/fireside-mark-queue'
import type { MarkAuthor, MarkDraft, MarkQueue, SendResult } from '@/components/live/fireside-mark-queue'
import { createMarkSender } from '@/components/live/fireside-mark-sender'
import type { MarkStorage } from '@/components/live/fireside-mark-sender'
import { readKeptMarks, sendKeptMarks } from '@/components/live/kept-marks'
import type { KeptPicture } from '@/components/live/kept-picture'
import {
  keepPicture,
  readPicture,
  readPictures,
  thinCurve,
  withoutNames,
} from '@/components/live/kept-picture'
import { createLiveFiringClient } from '@/components/live/live-firing-client'
import { PersonLine } from '@/components/live/person-line'
import { RoomKeptMarks } from '@/components/live/room-kept-marks'
import { readRoomScan } from '@/components/live/room-scan'
import { TabletKeeper } from '@/components/live/tablet-keeper'
import { idleLeftS, noteTouch } from '@/components/live/use-idle'
import { scannedSerial, useScanner } from '@/components/live/use-scanner'
import { pieceSerial } from '@/lib/batches/piece-serial'
import type { FiringState } from '@/lib/live/events'

const fixed = { seed: 20270201, numRuns: 200 }
const NOW = Date.UTC(2027, 1, 1, 13, 20, 5)
const ana: MarkAuthor = { id: 'a', name: 'T. Okafor' }
const ben: MarkAuthor = { id: 'b', name: 'M. Reyes' }
const draft = (n: number): MarkDraft => ({
  id: `mark-${n}`,
  kind: 'feed',
  at: new Date(NOW + n * 1000).toISOString(),
})

afterEach(() => {
  cleanup()
  localStorage.clear()
  vi.restoreAllMocks()
})

function memoryStorage(): MarkStorage {
  const kept = new Map<string, string>()
  return {
    getItem: (key) => kept.get(key) ?? null,
    setItem: (key, value) => void kept.set(key, value),
    removeItem: (key) => void kept.delete(key),
  }
}

describe('the PIN pad', () => {
  test('takes figures up to six by touch, deletes one, and enters from four on', () => {
    const onEnter = vi.fn()
    let figures = ''
    const pad = () => (
      <PinPad figures={figures} isBusy={false} onFigures={(next) => (figures = next)} onEnter={onEnter} />
    )
    const { rerender } = render(pad())
    const press = (name: string) => {
      fireEvent.click(screen.getByRole('button', { name }))
      rerender(pad())
    }
    for (const name of ['4', '1', '7']) press(name)
    expect(screen.getByRole('button', { name: 'Enter' }).hasAttribute('disabled')).toBe(true)
    for (const name of ['3', '8', '8', '9']) press(name)
    expect(figures).toBe('417388')
    press('Delete')
    expect(figures).toBe('41738')
    press('Enter')
    expect(onEnter).toHaveBeenCalledTimes(1)
  })

  test('never shows what was typed, and takes the keyboard’s figures too', () => {
    let figures = '41'
    const pad = () => (
      <PinPad figures={figures} isBusy={false} onFigures={(next) => (figures = next)} onEnter={() => {}} />
    )
    const { rerender } = render(pad())
    fireEvent.keyDown(window, { key: '7' })
    rerender(pad())
    fireEvent.keyDown(window, { key: 'x' })
    expect(figures).toBe('417')
    const dots = screen.getByRole('status')
    expect(dots.textContent).toBe('')
    expect(dots.getAttribute('aria-label')).toBe('3 figures typed')
  })

  test('law: whatever is pressed, at most six figures stand there', () => {
    const key = fc.oneof(
      fc.constantFrom('Backspace', 'Enter', 'a', 'F5'),
      fc.integer({ min: 0, max: 9 }).map(String),
    )
    fc.assert(
      fc.property(fc.array(key, { maxLength: 30 }), (keys) => {
        expect(keys.reduce(nextFigures, '')).toMatch(/^\d{0,6}$/)
      }),
      fixed,
    )
  })
})

describe('choosing a name', () => {
  const people: WhoPanelProps['people'] = [
    { ...ana, role: 'toaster', isLocked: false },
    { ...ben, role: 'toaster', isLocked: true },
  ]
  const show = (more: Partial<WhoPanelProps> = {}) => {
    const onPin = vi.fn()
    render(
      <WhoPanel
        people={people}
        presentId={ana.id}
        isBusy={false}
        fault={null}
        passwordHref="/sign-in?next=%2Froom"
        onPin={onPin}
        onChoose={() => {}}
        {...more}
      />,
    )
    return onPin
  }

  test('a touch of the name, then of the PIN', () => {
    const onPin = show()
    fireEvent.click(screen.getByRole('button', { name: /T. Okafor/ }))
    for (const figure of ['4', '1', '7', '3']) fireEvent.click(screen.getByRole('button', { name: figure }))
    fireEvent.click(screen.getByRole('button', { name: 'Enter' }))
    expect(onPin).toHaveBeenCalledWith(people[0], '4173')
    // Cleared at once, whatever comes of it.
    expect(screen.getByRole('status').getAttribute('aria-label')).toBe('0 figures typed')
  })

  test('every target is for gloves', () => {
    show()
    for (const button of screen.getAllByRole('button')) {
      expect(Number(/min-h-\[(\d+)px\]/.exec(button.className)?.[1])).toBeGreaterThanOrEqual(85)
    }
  })

  test('a locked PIN says that it needs the password, and leads there', () => {
    show()
    expect(screen.getByText('PIN locked, needs the password')).toBeTruthy()
    fireEvent.click(screen.getByRole('button', { name: /M. Reyes/ }))
    expect(screen.getByRole('link', { name: /password/ }).getAttribute('href')).toBe('/sign-in?next=%2Froom')
  })

  test('with nobody to choose it says what to do', () => {
    show({ people: [] })
    expect(screen.getByText(/Nobody has a PIN yet/)).toBeTruthy()
    expect(screen.getByRole('link', { name: /password/ })).toBeTruthy()
  })
})

describe('marks carry who made them', () => {
  /** A server that takes a mark only of the person whose session it is. */
  const server = (who: { id: string | null }) => {
    const taken: string[] = []
    return {
      taken,
      send: async (mark: MarkDraft, author?: MarkAuthor): Promise<SendResult> => {
        if (who.id === null || (author !== undefined && author.id !== who.id)) return { kind: 'unanswered' }
        taken.push(`${who.id} ${mark.id}`)
        return { kind: 'taken' }
      },
    }
  }

  test('a mark of one who has left waits while another marks, and goes when they are back', async () => {
    const who: { id: string | null } = { id: null }
    const { taken, send } = server(who)
    const storage = memoryStorage()
    const sender = createMarkSender({ key: 'k', storage, send, author: ana })
    sender.add(draft(1))
    await sender.flush()
    expect(waitingForOthers(sender.read(), ben.id)).toEqual([{ name: ana.name, count: 1 }])
    who.id = ben.id
    sender.become(ben)
    sender.add(draft(2))
    await sender.flush()
    expect(taken).toEqual(['b mark-2'])
    who.id = ana.id
    const later = createMarkSender({ key: 'k', storage, send, author: ana })
    await later.flush()
    expect(taken).toEqual(['b mark-2', 'a mark-1'])
    expect(later.read()).toEqual([])
  })

  test('with nobody signed in nothing goes', async () => {
    const { taken, send } = server({ id: ana.id })
    const storage = memoryStorage()
    const sender = createMarkSender({
      key: 'k',
      storage,
      send: async () => ({ kind: 'unanswered' }),
      author: ana,
    })
    sender.add(draft(1))
    await sender.flush()
    const alone = createMarkSender({ key: 'k', storage, send, author: null })
    await alone.flush()
    expect(taken).toEqual([])
    expect(alone.read()).toHaveLength(1)
  })

  test('law: in whatever order people change and the network comes and goes, each mark reaches the server once, as its author’s, and in the author’s order', async () => {
    const step = fc.oneof(
      fc.record({ do: fc.constant('mark' as const) }),
      fc.record({ do: fc.constant('change' as const), to: fc.constantFrom(ana, ben) }),
      fc.record({ do: fc.constant('network' as const), isUp: fc.boolean() }),
      fc.record({ do: fc.constant('reload' as const) }),
    )
    await fc.assert(
      fc.asyncProperty(fc.array(step, { minLength: 1, maxLength: 25 }), async (steps) => {
        const storage = memoryStorage()
        const made: { id: string; by: string }[] = []
        const got: { id: string; by: string }[] = []
        let [present, isUp, n] = [ana, true, 0]
        const send = async (mark: MarkDraft, author?: MarkAuthor): Promise<SendResult> => {
          if (!isUp || author?.id !== present.id) return { kind: 'unanswered' }
          if (!got.some((one) => one.id === mark.id)) got.push({ id: mark.id, by: present.id })
          return { kind: 'taken' }
        }
        const open = () => createMarkSender({ key: 'k', storage, send, author: present })
        let sender = open()
        for (const one of steps) {
          if (one.do === 'mark') {
            n += 1
            made.push({ id: `mark-${n}`, by: present.id })
            sender.add(draft(n))
          } else if (one.do === 'change') {
            present = one.to
            sender.become(present)
          } else if (one.do === 'network') isUp = one.isUp
          else sender = open()
          await sender.flush()
        }
        isUp = true
        for (const person of [ana, ben, ana]) {
          present = person
          sender = open()
          await sender.flush()
        }
        expect(sender.read()).toEqual([])
        for (const { id } of [ana, ben]) {
          expect(got.filter((one) => one.by === id)).toEqual(made.filter((one) => one.by === id))
        }
      }),
      fixed,
    )
  })

  test('who made a mark outlives a reload; a list of before has none', () => {
    const queue: MarkQueue = addToQueue(addToQueue([], draft(1), ana), draft(2))
    expect(parseQueue(printQueue(queue))).toEqual(queue)
    const torn = printQueue(queue).replace('"name":"T. Okafor"', '"name":7')
    expect(parseQueue(torn)).toHaveLength(1)
    expect(nextToSend(queue, ben.id)?.mark.id).toBe('mark-2')
  })

  test('the line says who marks, and whose marks wait', () => {
    const onChange = vi.fn()
    const device = { name: 'Tablet', kind: 'room' as const, hearthNumber: null, idleMinutes: 10 }
    const { rerender, container } = render(
      <PersonLine
        person={ben}
        device={device}
        waiting={[{ name: ana.name, count: 2 }]}
        onChange={onChange}
      />,
    )
    expect(container.textContent).toContain('Marking as M. Reyes')
    expect(container.textContent).toContain('2 marks of T. Okafor wait until T. Okafor signs in here')
    const button = screen.getByRole('button')
    expect(button.className).toContain('min-h-[85px]')
    fireEvent.click(button)
    expect(onChange).toHaveBeenCalledTimes(1)
    rerender(<PersonLine person={null} device={device} waiting={[]} onChange={onChange} />)
    expect(container.textContent).toContain('Nobody is signed in')
    rerender(<PersonLine person={ben} device={null} waiting={[]} onChange={onChange} />)
    expect(container.textContent).toBe('')
  })
})

describe('marks that are left in the browser', () => {
  const keep = (firingId: string, queue: MarkQueue) =>
    localStorage.setItem(`emberstave.marks.${firingId}`, printQueue(queue))

  test('are sent from the room, of all firings, while their person is signed in', async () => {
    keep('f1', addToQueue(addToQueue([], draft(1), ana), draft(2), ben))
    keep('f2', addToQueue([], draft(3), ana))
    const bodies: unknown[] = []
    vi.stubGlobal('fetch', async (url: string, init: RequestInit) => {
      bodies.push([url, JSON.parse(String(init.body))])
      return new Response('{}', { status: 201 })
    })
    expect(await sendKeptMarks(ana)).toBe(true)
    expect(bodies).toEqual([
      ['/api/firings/f1/marks', { ...draft(1), authorId: 'a' }],
      ['/api/firings/f2/marks', { ...draft(3), authorId: 'a' }],
    ])
    expect(readKeptMarks()).toMatchObject([{ firingId: 'f1', queue: [{ mark: { id: 'mark-2' } }] }])
  })

  test('one that was refused says which, whose and why, until it has been seen', async () => {
    keep('f1', addToQueue([], draft(1), ana))
    vi.stubGlobal(
      'fetch',
      async () => new Response(JSON.stringify({ detail: 'This firing is finished.' }), { status: 409 }),
    )
    render(<RoomKeptMarks person={ana} zone="UTC" />)
    const line = await screen.findByRole('alert')
    expect(line.textContent).toContain('Feed of 13:20 by T. Okafor was not taken. This firing is finished.')
    fireEvent.click(screen.getByRole('button', { name: 'Seen' }))
    await waitFor(() => expect(screen.queryByRole('alert')).toBeNull())
    expect(readKeptMarks()).toEqual([])
  })

  test('those that wait are said with their person', async () => {
    keep('f1', addToQueue([], draft(1), ana))
    render(<RoomKeptMarks person={null} zone="UTC" />)
    expect((await screen.findByRole('status')).textContent).toContain(
      'One mark waits in this browser, of T. Okafor',
    )
  })
})

const state: FiringState = {
  firingId: '7b0c8c1e-1111-4a7e-9c52-2a1f6f1d0001',
  epoch: 'e',
  atMs: NOW,
  state: 'toasting',
  revision: 4,
  signals: [],
  woodTempC: 191,
  planTempC: 188,
  climbCPerMin: 0.8,
  toastS: 1600,
  stage: null,
  next: { words: 'Nothing to do', dueInS: null },
  dose: { minutes: 3.6, targetMinutes: 10, planMinutesNow: 3.1, goodToPercent: 10.9, isIncomplete: false },
  forecast: null,
  stave: null,
  troubles: [],
  alarms: [],
  alarm: null,
}

describe('with the network down', () => {
  const base = { refusal: null, seenHere: new Set<string>(), unit: 'C' as const, zone: 'UTC' }

  test('the line dates what is shown and says that it is not live', () => {
    const queue = addToQueue(addToQueue([], draft(1), ana), draft(2), ana)
    const line = topLineOf({ ...base, state, queue, nowMs: NOW + 72_000 })
    expect(line).toMatchObject({ about: 'connection', headline: 'As of 13:20:05. Not live.', age: '1:12' })
    expect(line?.instruction).toContain('2 marks wait here')
  })

  test('law: from three seconds on it is never shown without that line', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 600_000 }), (agoMs) => {
        const line = topLineOf({ ...base, state, queue: [], nowMs: NOW + agoMs })
        expect(line?.about === 'connection').toBe(agoMs > 3_000)
      }),
      fixed,
    )
  })
})

describe('the kept picture', () => {
  const picture = (more: Partial<KeptPicture> = {}): KeptPicture => ({
    v: 1,
    savedAtMs: NOW,
    offsetMs: 0,
    firing: firingOf(state.firingId),
    rules: Object(null),
    zone: 'UTC',
    unit: 'C',
    canRun: true,
    canShelve: true,
    person: ana,
    device: null,
    state,
    columns: [],
    curves: { lead: [[NOW, 191]], opposite: [], coals: [] },
    ...more,
  })

  test('comes back as it was, for a day, by the server’s clock', () => {
    const storage = memoryStorage()
    expect(keepPicture(storage, picture({ offsetMs: 60_000 }))).toBe(true)
    const own = NOW - 60_000
    expect(readPicture(storage, state.firingId, own)).toMatchObject({
      savedAtMs: NOW,
      state: { woodTempC: 191 },
    })
    expect(readPicture(storage, state.firingId, own + 24 * 3600_000)).toBeNull()
    expect(readPicture(storage, 'another', own)).toBeNull()
  })

  test('what cannot be read, or is of another make, is none', () => {
    const storage = memoryStorage()
    for (const text of ['{', '[]', '{"v":2}', '{"v":1,"savedAtMs":1}', 'null']) {
      storage.setItem(`emberstave.picture.${state.firingId}`, text)
      expect(readPicture(storage, state.firingId, NOW), text).toBeNull()
    }
  })

  test('old ones go when the pictures are listed', () => {
    keepPicture(localStorage, picture())
    keepPicture(localStorage, picture({ savedAtMs: NOW - 25 * 3600_000, firing: firingOf('old') }))
    expect(readPictures(localStorage, NOW).map((one) => one.firing.id)).toEqual([state.firingId])
    expect(localStorage.getItem('emberstave.picture.old')).toBeNull()
  })

  test('holds no name of a person or customer from the firing', () => {
    const firing = firingOf(state.firingId)
    const text = JSON.stringify(withoutNames(firing))
    for (const name of ['T. Okafor', 'Harrow Bay', 'M. Reyes']) {
      expect(JSON.stringify(firing)).toContain(name)
      expect(text).not.toContain(name)
    }
  })

  test('law: a thinned curve keeps its first and last point, its order, and stays small', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 5_000 }), fc.integer({ min: 2, max: 500 }), (length, most) => {
        const atMs = Array.from({ length }, (_, i) => i * 200)
        const points = thinCurve(atMs, atMs.map(String).map(Number), most)
        expect(points.length).toBeLessThanOrEqual(most + 1)
        expect(points.at(0)?.[0]).toBe(atMs.at(0))
        expect(points.at(-1)?.[0]).toBe(atMs.at(-1))
        expect(points.map(([at]) => at)).toEqual(points.map(([at]) => at).sort((a, b) => a - b))
      }),
      fixed,
    )
    expect(thinCurve([1], [Number.NaN])).toEqual([[1, null]])
  })

  test('is shown before the server answers, as not heard, and makes room for what the server sends', () => {
    const handlers = new Map<string, (payload: unknown) => void>()
    let answer: ((reply: unknown) => void) | null = null
    const socket = {
      connected: true,
      on: (event: string, handler: (payload: unknown) => void) => handlers.set(event, handler),
      off: () => {},
      emit: (_event: string, _request: unknown, reply: (reply: unknown) => void) => (answer = reply),
    }
    const client = createLiveFiringClient(asSocket(socket), state.firingId, () => NOW + 60_000, {
      state,
      columns: [],
      curves: { lead: [[NOW, 191]], opposite: [], coals: [] },
    })
    expect(client.snapshot()).toMatchObject({
      connection: { kind: 'joining' },
      heardAtMs: null,
      state: { atMs: NOW },
    })
    expect(client.feeds.lead.length).toBe(1)
    const reply: ((reply: unknown) => void) | null = answer
    if (reply === null) throw new Error('it did not join')
    Reflect.apply(reply, null, [
      {
        firingId: state.firingId,
        epoch: 'f',
        isFresh: true,
        points: [[0, 'lead', NOW + 59_000, 193]],
        state: { ...state, epoch: 'f', atMs: NOW + 60_000 },
        staveColumns: [],
      },
    ])
    expect(client.snapshot()).toMatchObject({ connection: { kind: 'live' }, state: { epoch: 'f' } })
    expect(Array.from(client.feeds.lead.tempC())).toEqual([193])
    client.close()
  })
})

/** The part of a socket that the client uses. */
function asSocket(socket: object): Parameters<typeof createLiveFiringClient>[0] {
  return socket as Parameters<typeof createLiveFiringClient>[0]
}

function firingOf(id: string): KeptPicture['firing'] {
  const at = new Date(NOW).toISOString()
  return {
    id,
    state: 'toasting',
    piece: { id, kind: 'barrel', serial: 'SML-0427-P', position: 6 },
    batch: { id, number: 118, pieceCount: 14, woodLot: 'Norlund 22-07', customerName: 'Harrow Bay Cellars' },
    recipe: { id, name: 'Quay medium', versionId: id, versionNumber: 4 },
    hearthNumber: 2,
    toaster: { id, name: 'T. Okafor' },
    isTrial: false,
    isImported: false,
    isFirstOfDay: false,
    queuedAt: at,
    preheatAt: at,
    bendAt: at,
    toastAt: at,
    restAt: null,
    endedAt: null,
    endReason: null,
    score: null,
    revision: 1,
    recipeCopy: null,
    recipeSha256: null,
    siteSettingsVersion: 1,
    moisturePercent: null,
    moistureMethod: null,
    colour: null,
    smell: null,
    outsideTempC: null,
    remarks: '',
    probes: [],
    marks: [
      {
        id,
        kind: 'feed',
        at,
        recordedAt: at,
        by: 'M. Reyes',
        phase: null,
        stagePosition: null,
        call: null,
        words: '',
        step: null,
        answer: null,
        replacesId: null,
        isInForce: true,
      },
    ],
  }
}

describe('nobody at the tablet', () => {
  beforeEach(() => {
    vi.useFakeTimers({ now: NOW })
  })
  afterEach(() => {
    vi.useRealTimers()
  })
  const device = { name: 'Tablet', kind: 'room' as const, hearthNumber: null, idleMinutes: 10 }
  const pass = (ms: number) => act(() => vi.advanceTimersByTimeAsync(ms))

  test('the time left counts from the last touch', () => {
    expect(idleLeftS(NOW, 10, NOW)).toBe(600)
    expect(idleLeftS(NOW, 10, NOW + 601_000)).toBe(-1)
  })

  test('half a minute before, it says so; a touch begins the minutes anew', async () => {
    const calls = vi.fn(async () => new Response(null, { status: 204 }))
    vi.stubGlobal('fetch', calls)
    noteTouch()
    render(<TabletKeeper person={ana} device={device} />)
    await pass(569_000)
    expect(screen.queryByRole('status')).toBeNull()
    await pass(5_000)
    expect(screen.getByRole('status').textContent).toContain('T. Okafor is signed out in')
    fireEvent.pointerDown(window)
    await pass(1_000)
    expect(screen.queryByRole('status')).toBeNull()
    await pass(500_000)
    expect(calls).not.toHaveBeenCalled()
  })

  test('then the person is signed out as idle, and the room is opened', async () => {
    const urls: string[] = []
    vi.stubGlobal('fetch', async (url: string, init: RequestInit) => {
      urls.push(`${init.method} ${url}`)
      return new Response(null, { status: 204 })
    })
    const assign = vi.spyOn(window.location, 'assign').mockImplementation(() => {})
    noteTouch()
    render(<TabletKeeper person={ana} device={device} />)
    await pass(602_000)
    expect(urls).toEqual(['DELETE /api/session?why=idle'])
    expect(assign).toHaveBeenCalledWith('/room')
  })

  test('while the server does not answer nobody is signed out, and nothing of theirs is lost', async () => {
    vi.stubGlobal('fetch', async () => {
      throw new TypeError('Failed to fetch')
    })
    const assign = vi.spyOn(window.location, 'assign').mockImplementation(() => {})
    localStorage.setItem('emberstave.marks.f1', printQueue(addToQueue([], draft(1), ana)))
    noteTouch()
    render(<TabletKeeper person={ana} device={device} />)
    await pass(900_000)
    expect(assign).not.toHaveBeenCalled()
    expect(readKeptMarks()).toHaveLength(1)
  })

  test('a tablet that slept goes by its last touch, and with nobody signed in nothing is timed', async () => {
    const calls = vi.fn(async () => new Response(null, { status: 204 }))
    vi.stubGlobal('fetch', calls)
    vi.spyOn(window.location, 'assign').mockImplementation(() => {})
    noteTouch(NOW - 3_600_000)
    render(<TabletKeeper person={null} device={device} />)
    await pass(3_000)
    expect(calls).not.toHaveBeenCalled()
    cleanup()
    render(<TabletKeeper person={ana} device={device} />)
    await pass(3_000)
    expect(calls).toHaveBeenCalledTimes(1)
  })
})

describe('a scanner', () => {
  function Page({
    onScan,
    onPress,
    onSend,
  }: {
    onScan: (text: string) => void
    onPress: () => void
    onSend: () => void
  }) {
    useScanner(onScan)
    return (
      <form
        onSubmit={(event) => {
          event.preventDefault()
          onSend()
        }}
      >
        <button type="button" onKeyDown={onPress}>
          Stir
        </button>
        <input aria-label="Colour" />
      </form>
    )
  }
  const type = (target: Element, text: string, gapMs: number) => {
    let at = 1_000
    for (const key of [...text, 'Enter']) {
      const event = new KeyboardEvent('keydown', { key, bubbles: true, cancelable: true })
      Object.defineProperty(event, 'timeStamp', { value: at })
      at += gapMs
      target.dispatchEvent(event)
      if (key === 'Enter') return event
    }
    throw new Error('no Enter')
  }

  test('is heard whatever has the focus, and its Enter presses and sends nothing', () => {
    const [onScan, onPress, onSend] = [vi.fn(), vi.fn(), vi.fn()]
    render(<Page onScan={onScan} onPress={onPress} onSend={onSend} />)
    for (const target of [screen.getByRole('button'), screen.getByLabelText('Colour')]) {
      const enter = type(target, 'SML-0427-P', 8)
      expect(enter.defaultPrevented).toBe(true)
    }
    expect(onScan.mock.calls).toEqual([['SML-0427-P'], ['SML-0427-P']])
    expect(onPress.mock.calls.some(([event]) => Reflect.get(Object(event), 'key') === 'Enter')).toBe(false)
    expect(onSend).not.toHaveBeenCalled()
  })

  test('is told from a hand, whose Enter is left alone', () => {
    const onScan = vi.fn()
    render(<Page onScan={onScan} onPress={() => {}} onSend={() => {}} />)
    expect(type(screen.getByLabelText('Colour'), 'chestnut', 160).defaultPrevented).toBe(false)
    expect(onScan).not.toHaveBeenCalled()
  })

  test('law: a serial is read with or without hyphens, small or capital, from an address too; one wrong character is none', () => {
    const serial = fc
      .record({ prefix: fc.stringMatching(/^[A-Z]{2,5}$/), number: fc.integer({ min: 1, max: 99_999 }) })
      .map(({ prefix, number }) => pieceSerial(prefix, number))
    fc.assert(
      fc.property(
        serial,
        fc.nat(),
        fc.constantFrom(...'0123456789ABCDEFGHIJKLMNOPQRSTUVWXYZ'),
        (text, at, wrong) => {
          expect(scannedSerial(text)).toBe(text)
          expect(scannedSerial(text.replaceAll('-', '').toLowerCase())).toBe(text)
          expect(scannedSerial(`https://toast.example/barrels/${text}`)).toBe(text)
          const plain = text.replaceAll('-', '')
          const i = at % plain.length
          if (plain[i] === wrong) return
          expect(scannedSerial(plain.slice(0, i) + wrong + plain.slice(i + 1))).toBeNull()
        },
      ),
      fixed,
    )
  })

  const live = pieceSerial('SML', 12)
  const next = pieceSerial('SML', 40)
  const hearth = (number: number, serial: string | null) => ({
    id: `h${number}`,
    number,
    name: '',
    isActive: true,
    live:
      serial === null
        ? null
        : {
            firingId: 'f12',
            state: 'toasting' as const,
            serial,
            recipeName: 'Quay',
            versionNumber: 1,
            toasterName: '',
          },
    probes: [],
  })
  const piece = {
    id: 'p40',
    kind: 'barrel' as const,
    serial: next,
    position: 1,
    batch: { id: 'b', number: 1, pieceCount: 2, woodLot: '' },
    customer: { id: 'c', name: '' },
    recipe: { versionId: 'v', name: 'Quay', versionNumber: 1 },
    sizeAndShape: '225 L',
    firing: null,
    firedCount: 0,
    isWaiting: true,
  }
  const fire = { canFire: true, ownHearth: null }

  test('in the room opens a barrel’s firing, or its start on the hearth that is free or its own', () => {
    const one = [hearth(1, live), hearth(2, null)]
    const two = [...one, hearth(3, null)]
    expect(readRoomScan(live, one, [piece], fire)).toEqual({ kind: 'open', href: '/fireside/f12' })
    expect(readRoomScan(next, one, [piece], fire)).toEqual({
      kind: 'open',
      href: `/room/start?hearth=2&serial=${next}`,
    })
    expect(readRoomScan(next, two, [piece], fire)).toMatchObject({
      kind: 'choose hearth',
      piece: { id: 'p40' },
    })
    expect(readRoomScan(next, two, [piece], { ...fire, ownHearth: 3 })).toMatchObject({
      href: `/room/start?hearth=3&serial=${next}`,
    })
  })

  test('says why it leads nowhere', () => {
    const words = (text: string, hearths = [hearth(1, live)], who = fire) => {
      const scan = readRoomScan(text, hearths, [piece], who)
      return scan.kind === 'nothing' ? scan.words : null
    }
    expect(words('4006381333931')).toContain('no serial of ours')
    expect(words(pieceSerial('SML', 77))).toContain('neither over a fire nor in the queue')
    expect(words(next)).toContain('no hearth is free')
    expect(words(next, [hearth(2, null)], { ...fire, canFire: false })).toContain('Choose your name')
  })
})
