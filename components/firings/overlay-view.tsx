import { OverlayPair } from '@/components/firings/overlay-pair'
import { OverlayTable } from '@/components/firings/overlay-table'
import { overlayHref } from '@/components/firings/overlay-ids'
import { NumbersLink } from '@/components/numbers/numbers-link'
import Link from 'next/link'
import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { Notice } from '@/components/ui/notice'
import { PageHead } from '@/components/ui/page-head'
import type { Overlay } from '@/lib/firings/get-overlay'
import type { TemperatureUnit } from '@/lib/format'
import { formatCount, formatInstant } from '@/lib/format'

/** Firings laid over one another, with their terms side by side. */
export function OverlayView({
  overlay,
  ids,
  pickedId,
  zone,
  unit,
}: {
  overlay: Overlay
  ids: readonly string[]
  pickedId: string | null
  zone: string
  unit: TemperatureUnit
}) {
  const { comparison, refusal, candidates } = overlay
  const first = comparison?.firings[0]
  return (
    <>
      <PageHead
        title={
          comparison === null
            ? 'Compare firings'
            : `${formatCount(comparison.firings.length, 'firing')} compared`
        }
        sub={
          first === undefined
            ? undefined
            : `Laid over one another from the toast start, on the plan of ${first.firing.piece.serial}: ${first.firing.recipe.name}, version ${first.firing.recipe.versionNumber}.`
        }
        actions={<LinkButton href="/firings">Choose from the list</LinkButton>}
      />
      {refusal === null ? null : <Refusal refusal={refusal} ids={ids} />}
      {comparison === null ? null : (
        <>
          <OverlayPair firings={comparison.firings} pickedId={pickedId} unit={unit} />
          <OverlayTable comparison={comparison} pickedId={pickedId} unit={unit} />
          <p className="mt-2 text-mute">
            <NumbersLink />
          </p>
        </>
      )}
      {ids.length === 0 ? (
        <EmptyState title="Nothing to compare yet." action={<LinkButton href="/firings">Firings</LinkButton>}>
          Tick two to six firings in the list, or press Compare on the page of one.
        </EmptyState>
      ) : null}
      {ids.length === 1 && candidates.length === 0 ? (
        <EmptyState
          title="One firing alone cannot be compared."
          action={<LinkButton href="/firings">Firings</LinkButton>}
        >
          No other firing of this recipe version is scored yet. Tick two to six in the list.
        </EmptyState>
      ) : null}
      <Candidates ids={ids} candidates={candidates} zone={zone} />
    </>
  )
}

function Refusal({ refusal, ids }: { refusal: NonNullable<Overlay['refusal']>; ids: readonly string[] }) {
  const named = ids.flatMap((id) => {
    const sentence = refusal.byId[id]
    return sentence === undefined ? [] : [{ id, sentence }]
  })
  return (
    <Notice tone="attention" className="mb-5">
      <p>{refusal.detail}</p>
      {named.length === 0 ? null : (
        <ul className="mt-1">
          {named.map(({ id, sentence }) => (
            <li key={id}>
              {sentence}{' '}
              <Link className="link" href={overlayHref(ids.filter((one) => one !== id))}>
                Take it out
              </Link>
            </li>
          ))}
        </ul>
      )}
    </Notice>
  )
}

function Candidates({
  ids,
  candidates,
  zone,
}: {
  ids: readonly string[]
  candidates: Overlay['candidates']
  zone: string
}) {
  if (candidates.length === 0) return null
  return (
    <section className="mt-6 no-print">
      <h2 className="mb-1">{ids.length === 1 ? 'Choose at least one more' : 'Add another'}</h2>
      <p className="mb-2 text-soft">The newest firings of the same recipe version.</p>
      <ul className="flex flex-wrap gap-x-5 gap-y-1">
        {candidates.map((firing) => (
          <li key={firing.id}>
            <Link className="link" href={overlayHref([...ids, firing.id])}>
              {firing.piece.serial}
            </Link>{' '}
            <span className="text-mute">
              {formatInstant(firing.toastAt ?? firing.queuedAt, zone, 'day')}, {firing.score?.verdict}
            </span>
          </li>
        ))}
      </ul>
    </section>
  )
}
