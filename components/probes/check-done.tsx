import type { CheckKind } from '@/components/probes/check-draft'
import { Button } from '@/components/ui/button'
import { LinkButton } from '@/components/ui/link-button'
import { checkPoints } from '@/lib/probes/check-points'
import type { ProbeDetailDto } from '@/lib/probes/schema'

/** The check is recorded; what is still missing of the three. */
export function CheckDone({
  probe,
  kind,
  onAgain,
}: {
  probe: ProbeDetailDto
  kind: CheckKind
  onAgain: () => void
}) {
  const missing = checkPoints.filter((point) => !probe.checks.some((check) => check.kind === point.kind))
  const title = checkPoints.find((point) => point.kind === kind)?.title ?? ''
  return (
    <section>
      <h2 className="text-title" role="status">
        Recorded: {title.toLowerCase()}.
      </h2>
      <p className="mt-2 text-large">
        {stillWords(
          probe,
          missing.map((point) => point.title.toLowerCase()),
        )}
      </p>
      <div className="mt-6 flex flex-wrap gap-3">
        <Button kind={missing.length > 0 ? 'due' : 'plain'} className="min-h-14! px-6!" onClick={onAgain}>
          Check at another point
        </Button>
        <LinkButton className="min-h-14! px-6!" href={`/probes/${probe.id}`}>
          To the probe’s page
        </LinkButton>
      </div>
    </section>
  )
}

function stillWords(probe: ProbeDetailDto, missing: readonly string[]): string {
  if (missing.length > 0) return `Still missing for ${probe.name}: ${missing.join(' and ')}.`
  if (probe.usualRole === 'lead' && probe.leadFaults.length > 0) return probe.leadFaults.join(' ')
  return `All three points of ${probe.name} are checked.`
}
