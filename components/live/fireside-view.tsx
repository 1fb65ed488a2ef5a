import type { ReactNode } from 'react'
import { formatInstant } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { FiringDto } from '@/lib/firings/schema'
import type { FiringState } from '@/lib/live/events'
import { isFarFromPlan } from '@/lib/live/far-from-plan'
import { adviceFor } from '@/lib/live/signal-words'
import { nextAction, stageNow } from '@/lib/live/stage-now'
import { AfterTouch, isTouchShown } from './fireside-after-touch'
import type { Touched } from './fireside-after-touch'
import { FiresideAdvice } from './fireside-advice'
import type { AdviceAnswer } from './fireside-advice'
import { BeforeToast } from './fireside-before-toast'
import type { Call } from './fireside-calls'
import { cautionFor, cautions } from './fireside-cautions'
import { FiresideChart } from './fireside-chart'
import { DoseFigure } from './fireside-dose-figure'
import type { FiresideFacts } from './fireside-facts'
import { lidNow } from './fireside-facts'
import { FiresideHead } from './fireside-head'
import { FiresideMarks, markButtons } from './fireside-marks'
import { isCut, readProbe } from './fireside-reading'
import { FiresideScreen } from './fireside-screen'
import { FiresideStage } from './fireside-stage'
import { mainStep, stepClock } from './fireside-step'
import type { MainStep } from './fireside-step'
import { TopLine } from './fireside-top-line'
import type { TopLineProps } from './fireside-top-line'
import { FiresideWhy } from './fireside-why'
import type { WhyProps } from './fireside-why'
import { WoodFigure } from './fireside-wood-figure'
import type { LiveFiring } from './use-live-firing'
import type { MarkKind } from '@/lib/firings/schema'

export type FiresideViewProps = {
  firing: FiringDto
  facts: FiresideFacts
  live: LiveFiring
  nowMs: number
  zone: string
  unit: TemperatureUnit
  canRun: boolean
  isHeldByKey: boolean
  topLine: TopLineProps | null
  /** Why a touch on an alarm was not taken. */
  alarmProblem: string | null
  /** What a barcode scanner found out. */
  scanWords: string | null
  touched: Touched | null
  /** A step that wants its reason; null when none does. */
  why: WhyProps | null
  /** Advice that is to be taken or waved away. */
  advice: { words: string; answer: (answer: AdviceAnswer) => void } | null
  /** From the last firings like this one, before the toast. */
  nextLine: string | null
  /** How often the forecast was right lately. */
  forecastRecord: string | null
  /** Who marks, at a shared tablet. */
  person?: ReactNode
  /** In place of the marks while nobody is signed in there. */
  handless?: ReactNode
  onStep: (step: MainStep) => void
  onMark: (kind: MarkKind) => void
  onMore: () => void
  onUndo: () => void
  onMinutesAgo: (minutes: number) => void
  onCall: (call: Call) => void
}

/** A cue's caution is shown this long before it is due. */
const CAUTION_BEFORE_S = 60
/** Longer words of a cue do not fit beside the clock whole, and stand under the picture as well. */
const LONG_WORDS = 22

/** The whole fireside from what is known now. Draws only. */
export function FiresideView(props: FiresideViewProps) {
  const { firing, facts, live, nowMs, unit, canRun, topLine } = props
  const next = nextAction(facts, nowMs)
  return (
    <FiresideScreen
      topLine={topLine === null ? null : <TopLine {...topLine} />}
      head={<FiresideHead firing={firing} isTight={topLine !== null} onMore={props.onMore} />}
      stage={
        <FiresideStage
          clock={stepClock(facts, nowMs)}
          nextWords={next.words}
          step={canRun ? mainStep(facts, nowMs) : null}
          isHeldByKey={props.isHeldByKey}
          onStep={props.onStep}
        />
      }
      marks={
        canRun ? (
          <FiresideMarks buttons={markButtons(lidNow(facts.shownMarks), nowMs)} onMark={props.onMark} />
        ) : (
          (props.handless ?? null)
        )
      }
      figures={<Figures {...props} />}
      picture={<Picture facts={facts} live={live} nowMs={nowMs} unit={unit} nextLine={props.nextLine} />}
      person={props.person}
      strip={props.alarmProblem ?? props.scanWords ?? troubleStrip(live.state, nowMs) ?? stripOf(facts, next)}
      advice={
        canRun && props.advice !== null ? (
          <FiresideAdvice words={props.advice.words} onAnswer={props.advice.answer} />
        ) : null
      }
      overlay={<Overlay {...props} />}
    />
  )
}

/** Over the foot of the picture: why a step was short, and what can still be done about the last touch. */
function Overlay({ facts, nowMs, zone, touched, why, onUndo, onMinutesAgo, onCall }: FiresideViewProps) {
  const isShown = touched !== null && isTouchShown(touched, nowMs)
  return (
    <>
      {why === null ? null : <FiresideWhy {...why} />}
      {isShown ? (
        <AfterTouch
          touched={touched}
          markedAt={formatInstant(touched.atMs, zone, 'seconds')}
          nowMs={nowMs}
          earliestMs={facts.preheatMs}
          onUndo={onUndo}
          onMinutesAgo={onMinutesAgo}
          onCall={onCall}
        />
      ) : null}
    </>
  )
}

function Figures({ facts, live, nowMs, unit, zone, advice, canRun, forecastRecord }: FiresideViewProps) {
  const { state } = live
  const isNow = state !== null && !isCut(state, nowMs)
  const isToasting = facts.state === 'toasting'
  return (
    <>
      <WoodFigure
        depthMm={facts.content.leadPlace.depthMm}
        lead={readProbe(state, 'lead', nowMs)}
        opposite={readProbe(state, 'opposite', nowMs)}
        planTempC={isToasting && state !== null ? state.planTempC : null}
        climbCPerMin={state?.climbCPerMin ?? null}
        isOverMaximum={isNow && hasAlarm(state, 'wood maximum')}
        isFar={isNow && isToasting && isFarFromPlan(state, facts.plan)}
        unit={unit}
        zone={zone}
      />
      <DoseFigure
        dose={state?.dose ?? null}
        forecast={isNow ? state.forecast : null}
        noForecastWords={noForecastWords(state, isNow, facts.state)}
        isAdviceBelow={canRun && advice !== null}
        record={forecastRecord}
        toleranceLog10={facts.content.doseToleranceLog10}
        isLive={isNow && readProbe(state, 'lead', nowMs).kind === 'live'}
        nowMs={nowMs}
        zone={zone}
      />
    </>
  )
}

/** On, and still beyond its limit. */
function hasAlarm(state: FiringState, kind: FiringState['alarms'][number]['kind']): boolean {
  return state.alarms.some(
    (alarm) => alarm.kind === kind && (alarm.state === 'unacknowledged' || alarm.state === 'acknowledged'),
  )
}

function noForecastWords(state: FiringState | null, isNow: boolean, phase: FiringState['state']): string {
  if (state === null) return 'Waiting for the first word from the server.'
  if (!isNow) return 'No forecast while there is no connection.'
  if (phase === 'preheating' || phase === 'bending') return 'Dose counts from the toast start.'
  return phase === 'resting' ? 'Dose counted to the rest start.' : 'No forecast yet.'
}

function Picture({
  facts,
  live,
  nowMs,
  unit,
  nextLine,
}: Pick<FiresideViewProps, 'facts' | 'live' | 'nowMs' | 'unit' | 'nextLine'>) {
  if (facts.toastMs === null) return <BeforeToast facts={facts} nextLine={nextLine} unit={unit} />
  if (live.state === null) return <p className="px-6 py-4 text-soft">Fetching the curve so far.</p>
  const stagePosition = stageNow(facts, nowMs)?.position ?? null
  return (
    <FiresideChart
      key={live.state.epoch}
      facts={facts}
      live={live}
      stagePosition={stagePosition}
      cutNowMs={isCut(live.state, nowMs) ? nowMs : null}
      unit={unit}
    />
  )
}

/** What is wrong with the signals, with what to do; a lead probe without reading first. Null when nothing is. */
function troubleStrip(state: FiringState | null, nowMs: number): string | null {
  if (state === null || isCut(state, nowMs)) return null
  const lead = readProbe(state, 'lead', nowMs)
  const isMissing = lead.kind === 'none' && state.state !== 'preheating'
  const words = [
    ...(isMissing ? [adviceFor(lead.cause)] : []),
    ...state.troubles.map((trouble) => trouble.words),
    ...shelvedWords(state),
    ...(isMissing ? [cautions.noReading] : []),
  ]
  return words.length === 0 ? null : words.join(' ')
}

function shelvedWords(state: FiringState): string[] {
  const shelved = state.alarms.filter((alarm) => alarm.state === 'shelved')
  if (shelved.length === 0) return []
  return [`${shelved.length === 1 ? 'One alarm is' : `${shelved.length} alarms are`} shelved; see More.`]
}

/** The caution of what is being done or comes next; else the cue's words when they are long. */
function stripOf(facts: FiresideFacts, next: FiringState['next']): string | null {
  if (facts.state === 'bending') return cautions.bend
  if (facts.state === 'resting') return cautions.rest
  const isSoon = next.dueInS !== null && next.dueInS < CAUTION_BEFORE_S
  const caution = isSoon ? cautionFor(next.words.toLowerCase()) : null
  if (next.words.length <= LONG_WORDS) return caution
  return [`${next.words.charAt(0).toUpperCase()}${next.words.slice(1)}.`, caution].filter(Boolean).join(' ')
}
