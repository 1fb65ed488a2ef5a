import { SmallPair } from '@/components/chart/small-pair'
import type { TemperatureUnit } from '@/lib/format'
import { sketchSchema } from '@/lib/firings/sketch'

/** The small pair of a firing in a list; nothing where there is no sketch. */
export function SketchPair({
  sketch,
  title,
  unit,
  widthPx = 132,
  heightPx = 48,
}: {
  sketch: unknown
  title: string
  unit: TemperatureUnit
  widthPx?: number
  heightPx?: number
}) {
  const parsed = sketchSchema.safeParse(sketch)
  if (!parsed.success) return null
  const { timeS, tempC, band, wood } = parsed.data
  return (
    <SmallPair
      size="small"
      title={title}
      unit={unit}
      planBand={band}
      stages={[]}
      lead={{ name: '', timeS, tempC }}
      wood={
        wood === null
          ? null
          : {
              timesS: wood.timesS,
              depthsMm: wood.depthsMm,
              log10Dose: wood.log10Dose.map((value) => value ?? -Infinity),
              isotherm100Mm: wood.timesS.map(() => null),
              isotherm150Mm: wood.timesS.map(() => null),
              toastDepthMm: wood.toastDepthMm,
            }
      }
      widthPx={widthPx}
      heightPx={heightPx}
      className="h-auto w-[132px]"
    />
  )
}
