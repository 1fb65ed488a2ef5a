import Link from 'next/link'
import { DoseFacts } from '@/components/firings/dose-facts'
import { FiringHead } from '@/components/firings/firing-head'
import { FiringPair } from '@/components/firings/firing-pair'
import { FiringRemarks } from '@/components/firings/firing-remarks'
import { HappenedList } from '@/components/firings/happened-list'
import { ProbeFacts } from '@/components/firings/probe-facts'
import { TermTable } from '@/components/firings/term-table'
import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { Notice } from '@/components/ui/notice'
import { isLive } from '@/lib/firings/firing-states'
import type { FiringPicture } from '@/lib/firings/picture-types'
import type { TemperatureUnit } from '@/lib/format'

/** The page of one firing: picture to the left, why and what happened to the right. */
export function FiringView({ picture, unit }: { picture: FiringPicture; unit: TemperatureUnit }) {
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
            <FiringRemarks firing={picture.firing} unit={unit} />
          </div>
        </div>
        <div className="min-w-0 space-y-6">
          {score === null ? null : <TermTable score={score.result} refTempC={refTempC} unit={unit} />}
          <HappenedList picture={picture} unit={unit} />
        </div>
      </div>
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
