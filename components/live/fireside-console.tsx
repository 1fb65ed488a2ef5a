'use client'

import { capitalize } from '@/lib/format'
import { useRouter } from 'next/navigation'
import { useCallback, useMemo, useState } from 'react'
import useSWR from 'swr'
import { WhoSheet } from '@/components/devices/who-sheet'
import type { TemperatureUnit } from '@/lib/format'
import type { FiringDto, MarkKind } from '@/lib/firings/schema'
import { apiPath, getApi, isApiProblem } from '@/lib/http/api-client'
import type { ShortStep } from '@/lib/firings/short-steps'
import { nextAction } from '@/lib/live/stage-now'
import type { SiteRules } from '@/lib/science/site-rules'
import type { AtTheFire } from './device-view'
import type { Call } from './fireside-calls'
import { createServerClock, useServerTime } from './fireside-clock'
import { lidNow, firesideFacts } from './fireside-facts'
import type { FiresideFacts } from './fireside-facts'
import type { FiresideKey } from './fireside-keys'
import { listedAlarms, topLineOf } from './fireside-lines'
import { FiresideAlarms } from './fireside-alarms'
import type { FiresideSheetName } from './fireside-sheets'
import { FiresideSheets } from './fireside-sheets'
import type { MainStep } from './fireside-step'
import { mainStep, seldomSteps } from './fireside-step'
import { FiresideStepSheets } from './fireside-step-sheets'
import type { MoreStep } from './fireside-more'
import { isCut } from './fireside-reading'
import { FiresideEnded } from './fireside-ended'
import type { SiteWords } from './fireside-finish'
import { FiresideGone, NobodyMarks } from './fireside-nobody'
import { waitingForOthers } from './fireside-mark-queue'
import { FiresideSwap } from './fireside-swap'
import { FiresideView } from './fireside-view'
import type { KeptPicture } from './kept-picture'
import { PersonLine } from './person-line'
import { useAdvice } from './use-advice'
import { useAlarmHands } from './use-alarm-hands'
import { useFiresideKeys } from './use-fireside-keys'
import { refusalOf, useFiresideLive } from './use-fireside-live'
import { useKeptPicture } from './use-kept-picture'
import { useKeysOn } from './use-keys-on'
import { useMarkSender } from './use-mark-sender'
import { scannedSerial, useScanner } from './use-scanner'
import { useSignOut } from './use-sign-out'
import { useOpenReasons } from './use-open-reasons'
import type { OpenReasons } from './use-open-reasons'
import { useForecastRecord, useNextPieceLine } from './use-room-memory'
import { useSound } from './use-sound'
import { useTouched } from './use-touched'

const noSiteWords: SiteWords = { colour: [], smell: [] }
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
  /** Where to go once the firing has ended: its page at the desk, or the room where a PIN opens no desk. */
  endedHref: string
  /** Offered at the finish; none while the server is not reached. */
  siteWords?: SiteWords
  /** What this browser kept: shown, dated, until the server answers. */
  kept?: KeptPicture | null
} & AtTheFire

/** One firing at the fireside: fetches, follows and sends; {@link FiresideView} draws. */
export function FiresideConsole(props: FiresideConsoleProps) {
  const path = apiPath('/api/firings/{id}', { id: props.firing.id })
  const { kept = null, person, device } = props
  const {
    data: firing = props.firing,
    error,
    mutate,
  } = useSWR(path, getApi<FiringDto>, {
    fallbackData: props.firing,
    revalidateOnMount: false,
    // Nothing is dropped while the network is down: what was known stays, and says so.
    shouldRetryOnError: true,
  })
  const refresh = useCallback(() => void mutate(), [mutate])
  const [clock] = useState(() => createServerClock(props.serverNowMs))
  const live = useFiresideLive(firing.id, clock, refresh, kept)
  const { sender, queue, taken } = useMarkSender(firing.id, refresh, person)
  const nowMs = useServerTime(clock, props.serverNowMs)
  const facts = useMemo(
    () => firesideFacts(firing, queue, props.rules, taken),
    [firing, queue, taken, props.rules],
  )
  // Told by the server; a mark that waits here may say so before.
  const isOver = firing.endedAt !== null || isGone(error)
  useKeptPicture({ ...pictureOf(props), firing, person, device, isOver }, live)
  if (isGone(error)) return <FiresideGone serial={firing.piece.serial} />
  if (facts === null || facts.state === 'finished' || facts.state === 'abandoned') {
    return <FiresideEnded firing={firing} zone={props.zone} isDeskOpen={props.endedHref !== '/room'} />
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

function pictureOf({ rules, zone, unit, canRun, canShelve }: FiresideConsoleProps) {
  return { rules, zone, unit, canRun, canShelve }
}

/** It has ended, and is not this reader's any more: a device with nobody signed in, or another toaster. */
function isGone(error: unknown): boolean {
  return isApiProblem(error) && error.problem.status === 404
}

type RunningProps = FiresideConsoleProps & {
  facts: FiresideFacts
  live: ReturnType<typeof useFiresideLive>
  nowMs: number
  readNowMs: () => number
  onChanged: () => void
} & ReturnType<typeof useMarkSender>

function RunningFireside(props: RunningProps) {
  const { firing, facts, live, nowMs, sender, queue, canRun, unit, zone, person, device } = props
  const hands = useAlarmHands()
  const [sheet, setSheet] = useState<FiresideSheetName | null>(null)
  const router = useRouter()
  const canChange = device !== null && device.kind !== 'wall screen'
  // Whoever is signed in is the server's to say; the live page goes on meanwhile.
  const changed = () => {
    setSheet(null)
    if (props.kept) window.location.reload()
    else router.refresh()
  }
  const signOut = useSignOut(person, changed)
  const [areKeysOn, setKeysOn] = useKeysOn()
  const [scan, setScan] = useState<{ words: string; atMs: number } | null>(null)
  const touch = useTouched(sender, props.readNowMs)

  const mark = (kind: MarkKind) => {
    if (kind === 'note') setSheet('note')
    else touch.mark({ kind }, capitalize(kind))
  }
  const reasons = useOpenReasons(facts)
  const keepReason = ({ step: short, stagePosition }: ShortStep, words: string) => {
    const position = stagePosition === null ? {} : { stagePosition }
    sender.add({ ...newMark(props.readNowMs()), kind: 'reason', step: short, ...position, words })
  }
  const step = (main: MainStep) => {
    if (main.mark !== 'finish') touch.mark(main.mark, main.doneWords)
    else setSheet(reasons.open(nowMs).length > 0 ? 'why, then finish' : 'finish')
  }
  const isNow = live.state !== null && !isCut(live.state, nowMs)
  const advice = useAdvice(
    isNow && facts.state === 'toasting' ? (live.state?.forecast ?? null) : null,
    (words, answer) => sender.add({ ...newMark(props.readNowMs()), kind: 'advice', answer, words }),
  )
  const nextLine = useNextPieceLine(facts.toastMs === null ? firing.piece.id : null, unit)
  const forecastRecord = useForecastRecord()
  const topLine = topLineOf({
    state: live.state,
    queue,
    refusal: refusalOf(live.connection),
    seenHere: hands.seenHere,
    unit,
    nowMs,
    zone,
  })
  const main = mainStep(facts, nowMs)
  const next = nextAction(facts, nowMs)
  const sound = useSound({
    act: main?.isDue === true ? main.label : next.dueInS !== null && next.dueInS <= 0 ? next.words : null,
    isAlarm: isNow && topLine?.about === 'alarm' && !topLine.isSeen,
  })
  const seeAlarm = () => {
    if (canRun && topLine !== null && topLine.alarmId !== null && !topLine.isSeen) hands.see(topLine.alarmId)
  }
  const onKey = (key: FiresideKey) => {
    if (key === '?') setSheet('more')
    else if (key === 'a') seeAlarm()
    else if (key === 'u') touch.undo()
    else if (key === 'w') {
      if (canChange) setSheet('who')
    } else if (key !== 'e' && canRun) mark(kindOfKey(key, facts))
  }
  const onScan = (text: string) => {
    const words =
      scannedSerial(text) === facts.serial
        ? `Scanned ${facts.serial}: it is this barrel.`
        : `Scanned ${text.slice(0, 24)}: this is ${facts.serial}.`
    setScan({ words, atMs: props.readNowMs() })
  }
  useScanner(onScan)
  const isHeldByKey = useFiresideKeys(areKeysOn && sheet === null, onKey)
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
        why={
          reasons.now === null || !canRun
            ? null
            : {
                step: reasons.now,
                onReason: (words) => reasons.now !== null && keepReason(reasons.now, words),
                onOtherWords: () => setSheet('why'),
                onLater: () => reasons.now !== null && reasons.putOff(reasons.now),
              }
        }
        advice={advice}
        nextLine={nextLine}
        forecastRecord={forecastRecord}
        person={
          canChange ? (
            <PersonLine
              person={person}
              device={device}
              waiting={waitingForOthers(queue, person?.id ?? null)}
              onChange={() => setSheet('who')}
            />
          ) : null
        }
        handless={canChange && person === null ? <NobodyMarks onChoose={() => setSheet('who')} /> : null}
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
      {sheet === 'who' ? (
        <WhoSheet
          person={person}
          onSignedIn={changed}
          onSignOut={person === null ? undefined : signOut}
          onClose={() => setSheet(null)}
        />
      ) : null}
      <FiresideStepSheets
        sheet={sheet}
        onSheet={setSheet}
        firingId={firing.id}
        reasons={reasons}
        nowMs={nowMs}
        onReason={keepReason}
        onMoved={() => {
          setSheet(null)
          props.onChanged()
        }}
      />
      {sheet === 'swap' && canRun ? (
        <FiresideSwap
          firing={firing}
          readNowMs={props.readNowMs}
          onSwapped={() => {
            setSheet(null)
            props.onChanged()
          }}
          onClose={() => setSheet(null)}
        />
      ) : null}
      <FiresideSheets
        sheet={sheet}
        onSheet={setSheet}
        firing={firing}
        zone={zone}
        siteWords={props.siteWords ?? noSiteWords}
        endedHref={props.endedHref}
        canRun={canRun}
        unit={unit}
        areKeysOn={areKeysOn}
        onKeysOn={setKeysOn}
        sender={sender}
        waitingCount={queue.filter((queued) => queued.refusal === null).length}
        onTurn={() => touch.mark({ kind: 'turn' }, 'Turn')}
        moreSteps={canRun ? moreSteps({ facts, reasons, onSheet: setSheet, onStep: step }) : []}
        sound={{ soundLevel: sound.level, onSoundLevel: sound.choose }}
        onNote={(words) => touch.mark({ kind: 'note', words }, 'Note')}
        onChanged={props.onChanged}
      />
    </>
  )
}

function newMark(atMs: number) {
  return { id: crypto.randomUUID(), at: new Date(atMs).toISOString() }
}

/** Under "More": another hearth before the toast, a step left out, a reason still to be given. */
function moreSteps(input: {
  facts: FiresideFacts
  reasons: OpenReasons
  onSheet: (sheet: FiresideSheetName | null) => void
  onStep: (step: MainStep) => void
}): MoreStep[] {
  const { facts, reasons, onSheet, onStep } = input
  const isBeforeToast = facts.state === 'preheating' || facts.state === 'bending'
  return [
    ...(reasons.open(null).length > 0
      ? [{ label: 'Say why a step was short', onPress: () => onSheet('why') }]
      : []),
    ...(isBeforeToast ? [{ label: 'Move to another hearth', onPress: () => onSheet('move') }] : []),
    { label: 'Swap a probe', onPress: () => onSheet('swap') },
    ...seldomSteps(facts).map(({ label, step }) => ({
      label,
      onPress: () => {
        onSheet(null)
        onStep(step)
      },
    })),
  ]
}

const keyKinds = { s: 'stir', f: 'feed', m: 'mist', t: 'turn', o: 'turn over', n: 'note' } as const

function kindOfKey(key: keyof typeof keyKinds | 'l', facts: FiresideFacts): MarkKind {
  if (key === 'l') return lidNow(facts.shownMarks).isOn ? 'lid off' : 'lid on'
  return keyKinds[key]
}
