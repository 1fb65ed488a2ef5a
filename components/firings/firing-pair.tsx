import { Pair } from '@/components/chart/pair'
import type { PairMark } from '@/components/chart/pair-types'
import { pictureWords } from '@/components/firings/mark-words'
import type { FiringPicture } from '@/lib/firings/picture-types'
import { formatNumber, formatTemp, toShownDifference } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

/** The large picture of a firing: curve on plan, marks, dose as it grew, the stave by the model. */
export function FiringPair({ picture, unit }: { picture: FiringPicture; unit: TemperatureUnit }) {
  const { firing, curves, rules, score } = picture
  const content = firing.recipeCopy?.content
  if (curves === null || content === undefined) return null
  const bandC = Math.min(...content.stages.map((stage) => stage.bandC))
  const dose = score?.result.dose ?? null
  return (
    <Pair
      size="large"
      title={`Barrel ${firing.piece.serial}`}
      planBand={curves.planBand}
      planName={`plan ±${formatNumber(toShownDifference(bandC, unit))}°`}
      stages={curves.stages}
      lead={curves.lead}
      second={curves.opposite}
      marks={pairMarks(picture)}
      dose={{
        ...curves.dose,
        title: `Dose at ${formatNumber(content.leadPlace.depthMm, content.leadPlace.depthMm % 1 === 0 ? 0 : 1)} mm, minutes at ${formatTemp(rules.dose.refTempC, unit)}`,
        plan: curves.planDose,
        range:
          dose === null || score?.verdict === 'incomplete'
            ? null
            : { lowMin: dose.sameMount.lowMin, highMin: dose.sameMount.highMin },
      }}
      wood={curves.wood}
      unit={unit}
    />
  )
}

/** Marks in force and silences of the lead probe, on the seam. */
function pairMarks({ firing, curves }: FiringPicture): PairMark[] {
  if (curves === null) return []
  const zeroMs = Date.parse(curves.zeroAt)
  const endS = curves.lead.timeS.at(-1) ?? 0
  const marks = firing.marks.flatMap((mark) => {
    const words = mark.isInForce ? pictureWords(mark) : null
    const timeS = (Date.parse(mark.at) - zeroMs) / 1000
    return words === null || timeS < 0 || timeS > endS ? [] : [{ timeS, words }]
  })
  const gaps = curves.leadGaps.map((gap) => ({ timeS: gap.startS, words: 'no reading' }))
  return [...marks, ...gaps].sort((a, b) => a.timeS - b.timeS)
}
