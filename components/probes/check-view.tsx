import { CheckWalk } from '@/components/probes/check-walk'
import type { CheckWalkProps } from '@/components/probes/check-walk'
import { hearthWords, placeWords } from '@/components/probes/place-words'
import { EmptyState } from '@/components/ui/empty-state'
import { LinkButton } from '@/components/ui/link-button'
import { PageHead } from '@/components/ui/page-head'

/** The page that walks one through a check. */
export function CheckView(props: CheckWalkProps) {
  const { probe } = props
  return (
    <>
      <PageHead
        title={`Check ${probe.name}`}
        sub={
          `${hearthWords(probe.hearth?.number ?? null, probe.usualRole)}, ${placeWords(probe.place)}. ` +
          `Type ${probe.thermocoupleType}, ${probe.gateway.name}, channel ${probe.channel}.`
        }
        actions={<LinkButton href={`/probes/${probe.id}`}>To the probe’s page</LinkButton>}
      />
      {probe.retiredAt === null ? (
        <CheckWalk {...props} />
      ) : (
        <EmptyState title="This probe is retired.">It is not checked any more.</EmptyState>
      )}
    </>
  )
}
