import type { ReactNode } from 'react'
import { PlacementTable } from '@/components/probes/placement-table'
import { placeWords } from '@/components/probes/place-words'
import { RoomTabs } from '@/components/probes/room-tabs'
import { StudyResult } from '@/components/probes/study-result'
import { PageHead } from '@/components/ui/page-head'
import type { Problem } from '@/components/ui/problem'
import { Time } from '@/components/ui/time'
import type { TemperatureUnit } from '@/lib/format'
import type { StudyDto } from '@/lib/probes/study-schema'

/** One study of repeat placements: what is done next, what was found, and what it says. */
export function StudyView({
  study,
  zone,
  unit,
  actions,
  placing,
  onStrike,
}: {
  study: StudyDto
  zone: string
  unit: TemperatureUnit
  actions: ReactNode
  /** Null once it has ended, and for who does not check. */
  placing: ReactNode
  onStrike: ((placementId: string, reason: string) => Promise<Problem | null>) | null
}) {
  return (
    <>
      <PageHead
        title={`Repeat placements ${study.number}`}
        aside={study.state}
        sub={<Sub study={study} zone={zone} />}
        actions={actions}
      />
      <RoomTabs current="repeatability" />
      <div className="space-y-8">
        {placing}
        <section>
          <h2 className="mb-2">What they say</h2>
          <StudyResult study={study} unit={unit} />
        </section>
        <section>
          <h2 className="mb-2">Placements</h2>
          <PlacementTable placements={study.placements} zone={zone} unit={unit} onStrike={onStrike} />
        </section>
      </div>
    </>
  )
}

function Sub({ study, zone }: { study: StudyDto; zone: string }) {
  return (
    <>
      <p>
        {study.probe.name} placed again and again at {placeWords(study.place)}, beside {study.reference.name}.{' '}
        {study.heatWords}
      </p>
      <p>
        Begun <Time at={study.startedAt} zone={zone} /> by {study.startedBy}.
        {study.endedAt === null ? null : (
          <>
            {' '}
            {study.state === 'finished' ? `Signed by ${study.signedBy ?? ''}` : 'Abandoned'}{' '}
            <Time at={study.endedAt} zone={zone} />
            {study.endReason === null ? '.' : `: ${study.endReason}.`}
          </>
        )}
      </p>
      {study.adopted === null ? null : (
        <p>
          The site judges by it since <Time at={study.adopted.at} zone={zone} />, settings version{' '}
          {study.adopted.version}, by {study.adopted.by}.
        </p>
      )}
    </>
  )
}
