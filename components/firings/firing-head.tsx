import Link from 'next/link'
import { PrintButton } from '@/components/firings/print-button'
import { showPoints } from '@/components/firings/term-table'
import { DownloadLink } from '@/components/ui/download-link'
import { LinkButton } from '@/components/ui/link-button'
import { PageHead } from '@/components/ui/page-head'
import { VerdictText } from '@/components/ui/verdict-text'
import { isLive } from '@/lib/firings/firing-states'
import type { FiringPicture } from '@/lib/firings/picture-types'
import type { FiringDto } from '@/lib/firings/schema'
import { formatDose, formatDoseFigure, formatInstant } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** What was fired, by whom, when and from what; to the right its verdict in words, then points, then dose. */
export function FiringHead({ picture, unit }: { picture: FiringPicture; unit: TemperatureUnit }) {
  const { firing } = picture
  const kind = firing.piece.kind === 'head' ? 'Head' : 'Barrel'
  return (
    <PageHead
      title={`${kind} ${firing.piece.serial}`}
      aside={firing.isTrial ? 'trial' : undefined}
      sub={<Origin firing={firing} zone={picture.timeZone} />}
      verdict={<Verdict picture={picture} />}
      verdictSub={doseWords(picture, unit)}
      actions={<Actions firing={firing} hasCurves={picture.curves !== null} />}
    />
  )
}

function Actions({ firing, hasCurves }: { firing: FiringDto; hasCurves: boolean }) {
  return (
    <>
      {firing.preheatAt === null ? null : (
        <DownloadLink href={`/api/firings/${firing.id}/readings.csv`}>Readings as CSV</DownloadLink>
      )}
      <PrintButton />
      {isLive(firing.state) ? (
        <LinkButton kind="due" href={`/fireside/${firing.id}`}>
          Open at the fireside
        </LinkButton>
      ) : null}
      {hasCurves && !isLive(firing.state) ? (
        <LinkButton kind="main" href={`/firings/overlay?id=${firing.id}`}>
          Compare
        </LinkButton>
      ) : null}
    </>
  )
}

function Origin({ firing, zone }: { firing: FiringDto; zone: string }) {
  const link = 'underline-offset-3 hover:underline'
  return (
    <p>
      {whereAndWho(firing)}
      {whenWords(firing, zone)}.{' '}
      <Link className={link} href={`/recipe-versions/${firing.recipe.versionId}`}>
        {firing.recipe.name}, version {firing.recipe.versionNumber}
      </Link>
      .{' '}
      <Link className={link} href={`/batches/${firing.batch.id}`}>
        Batch {firing.batch.number}
      </Link>
      , {firing.piece.position} of {firing.batch.pieceCount}, lot {firing.batch.woodLot}, for{' '}
      {firing.batch.customerName}.
    </p>
  )
}

function whereAndWho(firing: FiringDto): string {
  if (firing.hearthNumber === null) return 'Waiting for a hearth'
  const who = firing.toaster === null ? '' : `, fired by ${firing.toaster.name}`
  const first = firing.isFirstOfDay ? ', first of the day' : ''
  return `Hearth ${firing.hearthNumber}${who}${first}${firing.isImported ? ', imported' : ''}`
}

function whenWords(firing: FiringDto, zone: string): string {
  if (firing.preheatAt === null) return ''
  const from = formatInstant(firing.preheatAt, zone, 'time')
  const day = formatInstant(firing.preheatAt, zone, 'date')
  if (firing.endedAt === null) return `, on ${day} since ${from}`
  return `, on ${day}, ${from} to ${formatInstant(firing.endedAt, zone, 'time')}`
}

const unfinished: Record<FiringDto['state'], string> = {
  queued: 'Waiting',
  preheating: 'Preheating',
  bending: 'Bending',
  toasting: 'Toasting',
  resting: 'Resting',
  finished: 'Being scored',
  abandoned: 'Abandoned',
}

function Verdict({ picture }: { picture: FiringPicture }) {
  const { firing, score } = picture
  if (score === null) {
    const tone = firing.state === 'abandoned' ? 'text-amber' : ''
    return <strong className={tone}>{unfinished[firing.state]}</strong>
  }
  return (
    <>
      <strong>
        <VerdictText verdict={score.verdict} />
      </strong>
      {score.points === null ? null : ` ${showPoints(score.points)} points`}
    </>
  )
}

function doseWords(
  { score, firing, curves, rules }: FiringPicture,
  unit: TemperatureUnit,
): string | undefined {
  if (score !== null) {
    const plan = `plan ${formatDoseFigure(score.planDoseMinutes)}`
    const hasTarget = Math.abs(score.result.targetDoseMin / score.planDoseMinutes - 1) > 0.005
    const target = hasTarget ? `, target ${formatDoseFigure(score.result.targetDoseMin)}` : ''
    if (score.doseMinutes === null || score.verdict === 'incomplete')
      return `Dose not scored, ${plan}${target}`
    const range = score.result.dose?.sameMount ?? null
    return `Dose ${formatDose(score.doseMinutes, range, rules.dose.refTempC, unit)}, ${plan}${target}`
  }
  if (firing.state === 'abandoned') return firing.endReason ?? undefined
  if (firing.state === 'finished') return 'Once the gateway has sent its last readings.'
  return curves === null
    ? undefined
    : `Plan ${formatDose(curves.planDoseMin, null, rules.dose.refTempC, unit)}`
}
