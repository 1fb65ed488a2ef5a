import { classNames } from '@/components/ui/class-names'
import type { ProbeDto } from '@/lib/probes/schema'
import type { LeadPlace } from '@/lib/recipes/schema'
import { isSamePlace, placeWords } from './room-start-list'

const roleNames = { lead: 'Lead', opposite: 'Opposite', coals: 'Coals', spare: 'Spare' } as const

/** The hearth's probes with their places; the lead's beside the place that the recipe is written for. */
export function RoomStartProbes({
  probes,
  lead,
  leadPlace,
  error,
}: {
  probes: readonly ProbeDto[]
  lead: ProbeDto | null
  leadPlace: LeadPlace | null
  error: string | undefined
}) {
  const isWrong = lead !== null && leadPlace !== null && !isSamePlace(lead.place, leadPlace)
  return (
    <div className="mt-3 text-[20px] leading-[1.3]">
      <h2 className="sr-only">Probes</h2>
      <dl className="grid grid-cols-[100px_1fr] gap-x-4">
        {probes
          .filter((probe) => probe.usualRole !== 'spare')
          .map((probe) => (
            <div key={probe.id} className="contents">
              <dt className="text-soft">{roleNames[probe.usualRole]}</dt>
              <dd>
                {probe.name}: {placeWords(probe.place)}
              </dd>
            </div>
          ))}
        <dt className="text-soft">Recipe</dt>
        <dd className={classNames(isWrong && 'font-[640] text-amber')}>
          {leadPlace === null ? 'choose a barrel to see its place' : `reads at ${placeWords(leadPlace)}`}
        </dd>
      </dl>
      {probes.some((probe) => probe.usualRole === 'lead') ? null : (
        <p className="font-[640] text-amber">
          This hearth has no lead probe. An administrator sets it on the page Probes.
        </p>
      )}
      {isWrong ? (
        <p className="font-[640] text-amber">
          The lead probe sits elsewhere. Move it: curves are compared at one place only.
        </p>
      ) : null}
      {error === undefined ? null : <p className="font-[640] text-red">{error}</p>}
    </div>
  )
}
