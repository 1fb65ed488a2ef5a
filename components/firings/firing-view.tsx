import Link from 'next/link'
import { DoseFacts } from '@/components/firings/dose-facts'
import { FiringAirFacts } from '@/components/firings/firing-air'
import { FiringHead } from '@/components/firings/firing-head'
import { FiringPair } from '@/components/firings/firing-pair'
import { FiringPhotos } from '@/components/firings/firing-photos'
import { FiringRemarks } from '@/components/firings/firing-remarks'
import { HappenedList } from '@/components/firings/happened-list'
import { ProbeFacts } from '@/components/firings/probe-facts'
import { ShortStepList } from '@/components/firings/short-step-list'
import { TermTable } from '@/components/firings/term-table'
import { LossList } from '@/components/losses/loss-list'
import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { Notice } from '@/components/ui/notice'
import { isLive } from '@/lib/firings/firing-states'
import type { FiringBeside } from '@/lib/firings/get-firing-beside'
import type { FiringPicture } from '@/lib/firings/picture-types'
import { shortStepsOf } from '@/lib/firings/short-steps'
import type { TemperatureUnit } from '@/lib/format'

/** The page of one firing: picture to the left, why and what happened to the right. */
export function FiringView({
  picture,
  beside,
  unit,
  canRun,
}: {
  picture: FiringPicture
  beside: FiringBeside
  unit: TemperatureUnit
  /** May say afterwards why a step was short, and add photos and losses. */
  canRun: boolean
}) {
  const { score, rules } = picture
  const refTempC = rules.dose.refTempC
  return (
    <>
      <FiringHead picture={picture} unit={unit} />
      <StateNotice picture={picture} />
      <div className="grid gap-x-9 gap-y-6 xl:grid-cols-[minmax(0,1fr)_minmax(22rem,28.5rem)]">
        <div className="min-w-0 space-y-6">
          {picture.curves === null ? (
            <NoPicture picture={picture} />
          ) : (
            <FiringPair picture={picture} unit={unit} />
          )}
          {score === null ? null : <DoseFacts score={score.result} refTempC={refTempC} unit={unit} />}
          <div className="grid gap-x-9 gap-y-6 lg:grid-cols-2">
            <ProbeFacts picture={picture} unit={unit} />
            <div className="min-w-0 space-y-6">
              <FiringRemarks firing={picture.firing} unit={unit} />
              <FiringAirFacts picture={picture} air={beside.air} unit={unit} />
            </div>
          </div>
          <Beside picture={picture} beside={beside} canRun={canRun} />
        </div>
        <div className="min-w-0 space-y-6">
          {score === null ? null : (
            <TermTable
              score={score.result}
              refTempC={refTempC}
              unit={unit}
              shortSteps={shortStepsOf(picture.firing)}
            />
          )}
          <ShortStepList firing={picture.firing} canRun={canRun} />
          <HappenedList picture={picture} unit={unit} />
        </div>
      </div>
    </>
  )
}

/** Losses and photos: kept beside the curve, never inside the score. */
function Beside({
  picture: { firing, timeZone },
  beside,
  canRun,
}: {
  picture: FiringPicture
  beside: FiringBeside
  canRun: boolean
}) {
  if (firing.state === 'queued') return null
  return (
    <>
      <LossList
        pieceId={firing.piece.id}
        firingId={firing.id}
        woodLot={firing.batch.woodLot}
        known={beside.losses}
        mayChange={canRun}
        canBreak={firing.bendAt !== null}
        zone={timeZone}
      />
      <FiringPhotos firingId={firing.id} known={beside.photos} mayAdd={canRun} zone={timeZone} />
    </>
  )
}

/** What the firing waits for, or why it has no score. */
function StateNotice({ picture }: { picture: FiringPicture }) {
  const { firing, score } = picture
  if (isLive(firing.state)) {
    return (
      <Notice className="mb-4">
        This firing goes on; what is drawn here is as of the moment the page was opened.{' '}
        <Link href={`/fireside/${firing.id}`} className="link">
          Follow it at the fireside
        </Link>
        .
      </Notice>
    )
  }
  if (firing.state === 'abandoned') {
    return (
      <Notice tone="attention" className="mb-4">
        Abandoned: {firing.endReason}. It is kept as it was and not scored; the barrel can be fired again.
      </Notice>
    )
  }
  if (firing.state === 'finished' && score === null) {
    return (
      <Notice className="mb-4">
        The score is made once the gateway has sent everything up to the end, usually within a minute.{' '}
        <Link href={`/firings/${firing.id}`} className="link">
          Look again
        </Link>
        .
      </Notice>
    )
  }
  return null
}

function NoPicture({ picture }: { picture: FiringPicture }) {
  const { firing } = picture
  if (firing.toastAt !== null) {
    return (
      <EmptyState title="No reading of the lead probe.">
        Nothing came from the lead probe since the toast began, so there is no curve, no dose and no stave to
        draw. Look at the probe, its lead and its gateway.
      </EmptyState>
    )
  }
  const isWaiting = firing.state === 'queued'
  return (
    <EmptyState
      title={isWaiting ? 'Not fired yet.' : 'No toast yet.'}
      action={isWaiting ? <LinkButton href="/room">Go to the room</LinkButton> : undefined}
    >
      {isWaiting
        ? 'This piece waits in the queue. Choose a hearth in the room to start it.'
        : 'The curve is drawn from the toast start on.'}
    </EmptyState>
  )
}
