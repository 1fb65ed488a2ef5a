import { Pair } from '@/components/chart/pair'
import { classNames } from '@/components/ui/class-names'
import { formatNumber, formatTemp, formatTempBare } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import type { FiresideFacts } from './fireside-facts'
import { pullOf } from './fireside-facts'
import { toPairStages } from './fireside-pair-data'
import { firesideType } from './fireside-type'

const none = { timeS: [], tempC: [] }

/** Preheat and bend: what must be right before the toast, in words, and the plan to come. */
export function BeforeToast({
  facts,
  nextLine,
  unit,
}: {
  facts: FiresideFacts
  /** From the last firings like this one. */
  nextLine: string | null
  unit: TemperatureUnit
}) {
  const { plan, content } = facts
  return (
    <div className="flex h-full min-h-0 flex-col">
      <dl className="grid grid-cols-2 gap-x-8 gap-y-4 px-6 pt-4 pb-5">
        {factsOf(facts, unit).map(({ term, value, more, isOff }) => (
          <div key={term}>
            <dt className={classNames(firesideType.label.className, 'text-soft')}>{term}</dt>
            <dd className={classNames('text-[34px] leading-[1.15] font-[640]', isOff && 'text-amber')}>
              {value} <span className="text-[20px] font-normal text-soft">{more}</span>
            </dd>
          </div>
        ))}
      </dl>
      {nextLine === null ? null : (
        <p className={classNames(firesideType.label.className, 'px-6 pb-4 font-[560]')}>{nextLine}</p>
      )}
      <p className={classNames(firesideType.label.className, 'border-t border-line px-6 pt-3 text-soft')}>
        The plan to come
      </p>
      <div className="min-h-0 flex-1 px-2 pb-2">
        <Pair
          size="large"
          title={`The plan of barrel ${facts.serial}`}
          planBand={plan.band}
          stages={toPairStages(plan, null)}
          lead={{ name: 'lead', ...none }}
          xMaxS={plan.totalS}
          limitC={content.limits.woodMaximumC}
          unit={unit}
          className="h-full"
        />
      </div>
    </div>
  )
}

type Fact = { term: string; value: string; more: string; isOff: boolean }

function factsOf(facts: FiresideFacts, unit: TemperatureUnit): Fact[] {
  const { preheat, bend, planStartTempC } = facts.content
  const { moistureMinPercent: low, moistureMaxPercent: high } = preheat
  const moisture = facts.moisturePercent
  const isMoistureOff = moisture !== null && (moisture < low || moisture > high)
  const list: Fact[] = [
    {
      term: 'Stave moisture',
      value: moisture === null ? 'not measured' : `${formatNumber(moisture, 1)} %`,
      more: `recipe ${low} to ${high} %`,
      isOff: isMoistureOff,
    },
    {
      term: 'Preheat',
      value: preheat.method === 'none' ? 'no water' : preheat.method,
      more:
        preheat.method === 'none'
          ? `${preheat.minutes} min`
          : `water ${formatTemp(preheat.waterTempC, unit)}, ${preheat.minutes} min`,
      isOff: false,
    },
  ]
  if (facts.content.pieceKind === 'barrel' && bend.minimumMinutes > 0) {
    const pull = pullOf(facts)
    list.push({
      term: 'Pull',
      value: pull === null ? `${bend.minimumMinutes} min` : `${formatNumber(pull.minutes, 1)} min`,
      more:
        pull === null
          ? `at least, wood below ${formatTempBare(bend.woodLimitC, unit)}`
          : pullWords(pull.isShort, bend.minimumMinutes),
      isOff: pull?.isShort ?? false,
    })
  }
  list.push({
    term: 'Toast begins at',
    value: formatTemp(planStartTempC, unit),
    more: `first stage ${facts.content.stages[0]?.name ?? ''}`,
    isOff: false,
  })
  return list
}

function pullWords(isShort: boolean, minimumMinutes: number): string {
  return isShort ? `short of the ${minimumMinutes} min asked` : `${minimumMinutes} min asked`
}
