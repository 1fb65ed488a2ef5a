import Link from 'next/link'
import { DoseSum } from '@/components/barrels/dose-sum'
import { FiringTable } from '@/components/firings/firing-table'
import { LossList } from '@/components/losses/loss-list'
import { NumbersLink } from '@/components/numbers/numbers-link'
import { Button } from '@/components/ui/button'
import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { PageHead } from '@/components/ui/page-head'
import type { BarrelPicture } from '@/lib/barrels/get-barrel'
import type { TemperatureUnit } from '@/lib/format'

/** One barrel or head: its firings, each with its own curve and score, and its losses by stave. */
export function BarrelView({ barrel, unit }: { barrel: BarrelPicture; unit: TemperatureUnit }) {
  const { piece, firings, losses, timeZone, mayChange } = barrel
  const scoredCount = firings.filter((firing) => firing.score !== null).length
  return (
    <>
      <PageHead
        title={`${piece.kind === 'head' ? 'Head' : 'Barrel'} ${piece.serial}`}
        aside={piece.isWaiting ? 'waiting' : undefined}
        sub={
          <p>
            {piece.sizeAndShape}.{' '}
            <Link
              href={`/recipe-versions/${piece.recipe.versionId}`}
              className="underline-offset-3 hover:underline"
            >
              {piece.recipe.name}, version {piece.recipe.versionNumber}
            </Link>
            .{' '}
            <Link href={`/batches/${piece.batch.id}`} className="underline-offset-3 hover:underline">
              Batch {piece.batch.number}
            </Link>
            , {piece.position} of {piece.batch.pieceCount}, lot {piece.batch.woodLot}, for{' '}
            {piece.customer.name}.
          </p>
        }
      />
      <section>
        <h2 className="mb-2">Firings</h2>
        {firings.length === 0 ? (
          <EmptyState
            title="Not fired yet."
            action={piece.isWaiting ? <LinkButton href="/room">Go to the room</LinkButton> : undefined}
          >
            Each firing of this {piece.kind} stands here with its own curve and score.
          </EmptyState>
        ) : (
          <form id="overlay" action="/firings/overlay" method="get">
            <FiringTable firings={firings} zone={timeZone} unit={unit} />
            {scoredCount > 1 ? (
              <Button type="submit" className="mt-3">
                Lay the ticked ones over one another
              </Button>
            ) : null}
          </form>
        )}
        <DoseSum firings={firings} unit={unit} />
        <p className="mt-2 text-mute">
          <NumbersLink />
        </p>
      </section>
      <div className="mt-8 max-w-[56rem]">
        <LossList
          pieceId={piece.id}
          firingId={null}
          woodLot={piece.batch.woodLot}
          known={losses}
          mayChange={mayChange}
          canBreak={false}
          zone={timeZone}
        />
      </div>
    </>
  )
}
