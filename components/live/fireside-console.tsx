'use client'

import { useCallback, useMemo, useState } from 'react'
import useSWR from 'swr'
import type { TemperatureUnit } from '@/lib/format'
import type { FiringDto, MarkKind } from '@/lib/firings/schema'
import { apiPath, getApi } from '@/lib/http/api-client'
import type { SiteRules } from '@/lib/science/site-rules'
import type { Call } from './fireside-calls'
import { createServerClock, useServerTime } from './fireside-clock'
import { lidNow, firesideFacts } from './fireside-facts'
import type { FiresideFacts } from './fireside-facts'
import type { FiresideKey } from './fireside-keys'
import { capital, listedAlarms, topLineOf } from './fireside-lines'
import { FiresideAlarms } from './fireside-alarms'
import type { FiresideSheetName } from './fireside-sheets'
import { FiresideSheets } from './fireside-sheets'
import type { MainStep } from './fireside-step'
import { FiresideEnded } from './fireside-ended'
import { FiresideView } from './fireside-view'
import { useAlarmHands } from './use-alarm-hands'
import { useFiresideKeys } from './use-fireside-keys'
import { refusalOf, useFiresideLive } from './use-fireside-live'
import { useKeysOn } from './use-keys-on'
import { useMarkSender } from './use-mark-sender'
import { useTouched } from './use-touched'

const SCAN_SHOWN_MS = 10_000

export type FiresideConsoleProps = {
  firing: FiringDto
  rules: SiteRules
  zone: string
  unit: TemperatureUnit
  /** Hands: may run this firing. */
  canRun: boolean
  canShelve: boolean
  serverNowMs: number
}

/** One firing at the fireside: fetches, follows and sends; {@link FiresideView} draws. */
export function FiresideConsole(props: FiresideConsoleProps) {
  const path = apiPath('/api/firings/{id}', { id: props.firing.id })
  const { data: firing = props.firing, mutate } = useSWR(path, getApi<FiringDto>, {
    fallbackData: props.firing,
    revalidateOnMount: false,
    // Nothing is dropped while the network is down: what was known stays, and says so.
    shouldRetryOnError: true,
  })
  const refresh = useCallback(() => void mutate(), [mutate])
  const [clock] = useState(() => createServerClock(props.serverNowMs))
  const live = useFiresideLive(firing.id, clock, refresh)
  const { sender, queue, taken } = useMarkSender(firing.id, refresh)
  const nowMs = useServerTime(clock, props.serverNowMs)
  const facts = useMemo(
    () => firesideFacts(firing, queue, props.rules, taken),
    [firing, queue, taken, props.rules],
  )
  if (facts === null || facts.state === 'finished' || facts.state === 'abandoned') {
    return <FiresideEnded firing={firing} zone={props.zone} />
  }
  return (
    <RunningFireside
      {...props}
      firing={firing}
      facts={facts}
      live={live}
      nowMs={nowMs}
      readNowMs={clock.nowMs}
      sender={sender}
      queue={queue}
      taken={taken}
      onChanged={refresh}
    />
  )
}

type RunningProps = FiresideConsoleProps & {
  facts: FiresideFacts
  live: ReturnType<typeof useFiresideLive>
  nowMs: number
  readNowMs: () => number
  onChanged: () => void
} & ReturnType<typeof useMarkSender>

function RunningFireside(props: RunningProps) {
  const { firing, facts, live, nowMs, sender, queue, canRun, unit, zone } = props
  const hands = useAlarmHands()
  const [sheet, setSheet] = useState<FiresideSheetName | null>(null)
  const [areKeysOn, setKeysOn] = useKeysOn()
  const [scan, setScan] = useState<{ words: string; atMs: number } | null>(null)
  const touch = useTouched(sender, props.readNowMs)

  const mark = (kind: MarkKind) => {
    if (kind === 'note') setSheet('note')
    else touch.mark({ kind }, capital(kind))
  }
  const step = (main: MainStep) => {
    if (main.mark === 'finish') setSheet('finish')
    else touch.mark(main.mark, main.doneWords)
  }
  const topLine = topLineOf({
    state: live.state,
    queue,
    refusal: refusalOf(live.connection),
    seenHere: hands.seenHere,
    unit,
    nowMs,
    zone,
  })
  const seeAlarm = () => {
    if (canRun && topLine !== null && topLine.alarmId !== null && !topLine.isSeen) hands.see(topLine.alarmId)
  }
  const onKey = (key: FiresideKey) => {
    if (key === '?') setSheet('more')
    else if (key === 'a') seeAlarm()
    else if (key === 'u') touch.undo()
    else if (key !== 'e' && canRun) mark(kindOfKey(key, facts))
  }
  const onScan = (text: string) => {
    const isThis = text.replaceAll('-', '').toUpperCase() === facts.serial.replaceAll('-', '').toUpperCase()
    const words = isThis
      ? `Scanned ${facts.serial}: it is this barrel.`
      : `Scanned ${text}: this is ${facts.serial}.`
    setScan({ words, atMs: props.readNowMs() })
  }
  const isHeldByKey = useFiresideKeys(areKeysOn && sheet === null, onKey, onScan)
  const refusedMark = queue.find((queued) => queued.refusal !== null)
  const seenHandlers = {
    alarm: canRun && topLine?.isSeen === false ? seeAlarm : undefined,
    mark: refusedMark === undefined ? undefined : () => sender.drop(refusedMark.mark.id),
    connection: undefined,
  }

  return (
    <>
      <FiresideView
        firing={firing}
        facts={facts}
        live={live}
        nowMs={nowMs}
        zone={zone}
        unit={unit}
        canRun={canRun}
        isHeldByKey={isHeldByKey && canRun}
        topLine={
          topLine === null
            ? null
            : {
                ...topLine,
                onSeen: seenHandlers[topLine.about],
                onList: topLine.about === 'alarm' ? () => setSheet('alarms') : undefined,
              }
        }
        alarmProblem={hands.problem?.title ?? null}
        scanWords={scan !== null && nowMs - scan.atMs < SCAN_SHOWN_MS ? scan.words : null}
        touched={touch.touched}
        onStep={step}
        onMark={mark}
        onMore={() => setSheet('more')}
        onUndo={touch.undo}
        onMinutesAgo={touch.moveTo}
        onCall={(call: Call) => touch.call(call)}
      />
      {sheet === 'alarms' ? (
        <FiresideAlarms
          alarms={listedAlarms(live.state, hands.seenHere)}
          hands={hands}
          canSee={canRun}
          canShelve={props.canShelve}
          shelveAtMostMin={props.rules.alarms.shelveAtMostMin}
          nowMs={nowMs}
          zone={zone}
          unit={unit}
          onClose={() => setSheet(null)}
        />
      ) : null}
      <FiresideSheets
        sheet={sheet}
        onSheet={setSheet}
        firingId={firing.id}
        canRun={canRun}
        unit={unit}
        areKeysOn={areKeysOn}
        onKeysOn={setKeysOn}
        sender={sender}
        waitingCount={queue.filter((queued) => queued.refusal === null).length}
        onTurn={() => touch.mark({ kind: 'turn' }, 'Turn')}
        onNote={(words) => touch.mark({ kind: 'note', words }, 'Note')}
        onChanged={props.onChanged}
      />
    </>
  )
}

const keyKinds = { s: 'stir', f: 'feed', m: 'mist', t: 'turn', o: 'turn over', n: 'note' } as const

function kindOfKey(key: keyof typeof keyKinds | 'l', facts: FiresideFacts): MarkKind {
  if (key === 'l') return lidNow(facts.shownMarks).isOn ? 'lid off' : 'lid on'
  return keyKinds[key]
}
