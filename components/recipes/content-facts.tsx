import { Facts } from '@/components/ui/facts'
import { Notice } from '@/components/ui/notice'
import { formatDoseFigure, formatTemp, formatTempDifference, toShownDifference, unitName } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { cautionAboveC, hotWoodCaution } from '@/lib/recipes/cautions'
import { printCues } from '@/lib/recipes/cue-text'
import type { RecipeContent } from '@/lib/recipes/schema'

function plain(value: number): string {
  return String(Number(value.toFixed(2)))
}

/** What a frozen version says, before the fire and never, as lines of words. */
export function ContentFacts({
  content,
  targetDoseMinutes,
  doses,
  refTempC,
  unit,
}: {
  content: RecipeContent
  targetDoseMinutes: number
  /** Dose of each stage, min at the reference temperature. */
  doses: readonly number[]
  refTempC: number
  unit: TemperatureUnit
}) {
  const { preheat, bend, leadPlace, limits } = content
  return (
    <div className="min-w-0 space-y-5">
      <section aria-label="Before the fire">
        <h2 className="mb-1 font-[640]">Before the fire</h2>
        <Facts
          facts={[
            {
              name: 'Piece',
              value: `${content.pieceKind}, ${content.sizeAndShape}, ${plain(content.thicknessMm)} mm thick`,
            },
            {
              name: 'Stave moisture',
              value: `${plain(preheat.moistureMinPercent)} to ${plain(preheat.moistureMaxPercent)} %`,
            },
            {
              name: 'Water',
              value:
                preheat.method === 'none'
                  ? 'none'
                  : `${formatTemp(preheat.waterTempC, unit)} ${preheat.method}, ${plain(preheat.minutes)} min`,
            },
            {
              name: 'Bend',
              value: `at least ${plain(bend.minimumMinutes)} min, wood below ${formatTemp(bend.woodLimitC, unit)}`,
            },
            {
              name: 'Read at',
              value: `${leadPlace.height}, side ${leadPlace.side}, ${plain(leadPlace.depthMm)} mm deep, ${leadPlace.mounting} mount`,
            },
            { name: 'Plan starts at', value: formatTemp(content.planStartTempC, unit) },
          ]}
        />
      </section>
      <section aria-label="Fire">
        <h2 className="mb-1 font-[640]">Fire</h2>
        <StageList content={content} doses={doses} unit={unit} />
      </section>
      <section aria-label="Never">
        <h2 className="mb-1 font-[640]">Never</h2>
        <Facts
          facts={[
            { name: 'Wood above', value: formatTemp(limits.woodMaximumC, unit) },
            {
              name: 'Climb above',
              value: `${plain(toShownDifference(limits.climbMaximumCPerMin, unit))} ${unitName(unit)} a minute`,
            },
            { name: 'Opposite sides apart by', value: formatTempDifference(limits.spreadC, unit) },
          ]}
        />
        {limits.woodMaximumC > cautionAboveC ? (
          <Notice tone="attention" className="mt-2">
            <strong className="font-[640] text-amber">Caution.</strong> {hotWoodCaution}
          </Notice>
        ) : null}
      </section>
      <section aria-label="Target">
        <h2 className="mb-1 font-[640]">Target</h2>
        <Facts
          facts={[
            {
              name: 'Dose',
              value: `${formatDoseFigure(targetDoseMinutes)} min at ${formatTemp(refTempC, unit)}${content.doseTargetMinutes === null ? ', the plan’s own' : ', set'}`,
            },
            { name: 'Tolerance', value: `± ${content.doseToleranceLog10} in log10` },
            { name: 'Rest', value: `${plain(content.restMinutes)} min` },
          ]}
        />
      </section>
      {content.flavourIntent === '' && content.notes === '' ? null : (
        <section aria-label="In words">
          <h2 className="mb-1 font-[640]">In words</h2>
          {[content.flavourIntent, content.notes]
            .filter((words) => words !== '')
            .map((words) => (
              <p key={words} className="mb-1 max-w-[60ch] whitespace-pre-line">
                {words}
              </p>
            ))}
        </section>
      )}
    </div>
  )
}

function StageList({
  content,
  doses,
  unit,
}: {
  content: RecipeContent
  doses: readonly number[]
  unit: TemperatureUnit
}) {
  const head = 'py-[5px] pr-4 font-normal whitespace-nowrap'
  return (
    <table className="w-full border-collapse">
      <caption className="sr-only">Stages of the fire</caption>
      <thead>
        <tr className="border-b border-line text-small text-soft">
          <th scope="col" className={`${head} pl-[10px] text-left`}>
            Stage
          </th>
          <th scope="col" className={`${head} text-right`}>
            To {unitName(unit)}
          </th>
          <th scope="col" className={`${head} text-right`}>
            Min
          </th>
          <th scope="col" className={`${head} text-right`}>
            ± {unitName(unit)}
          </th>
          <th scope="col" className={`${head} text-left`}>
            Lid
          </th>
          <th scope="col" className={`${head} text-left`}>
            Do
          </th>
          <th scope="col" className="py-[5px] pr-[10px] text-right font-normal">
            Dose
          </th>
        </tr>
      </thead>
      <tbody>
        {content.stages.map((stage, index) => (
          <tr key={index} className="border-b border-line align-top">
            <th scope="row" className="py-[5.5px] pr-4 pl-[10px] text-left font-normal">
              {stage.name}
              {stage.coalsTargetTempC === null ? null : (
                <span className="block text-small text-soft">
                  coals {formatTemp(stage.coalsTargetTempC, unit)}
                </span>
              )}
            </th>
            <td className="py-[5.5px] pr-4 text-right">
              {formatTemp(stage.targetTempC, unit).replace(/\s?°[CF]$/, '')}
            </td>
            <td className="py-[5.5px] pr-4 text-right">{plain(stage.minutes)}</td>
            <td className="py-[5.5px] pr-4 text-right">
              {plain(Number(toShownDifference(stage.bandC, unit).toFixed(1)))}
            </td>
            <td className="py-[5.5px] pr-4">{stage.lid}</td>
            <td className="py-[5.5px] pr-4">{printCues(stage.cues)}</td>
            <td className="py-[5.5px] pr-[10px] text-right">{formatDoseFigure(doses[index] ?? 0)}</td>
          </tr>
        ))}
      </tbody>
    </table>
  )
}
