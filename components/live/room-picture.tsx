import { memo } from 'react'
import { SmallPair } from '@/components/chart/small-pair'
import type { Sketch } from '@/lib/firings/sketch'
import type { TemperatureUnit } from '@/lib/format'

/** The small pair of a hearth as the server sketched it. Drawn again only when the sketch is, not with every second. */
export const RoomPicture = memo(function RoomPicture({
  sketch,
  serial,
  unit,
  isLow,
}: {
  sketch: Sketch
  serial: string
  unit: TemperatureUnit
  /** Five or six rows share the screen. */
  isLow: boolean
}) {
  const { timeS, tempC, band, wood } = sketch
  const nowS = timeS.at(-1) ?? null
  return (
    <SmallPair
      size="small"
      title={serial}
      unit={unit}
      planBand={band}
      stages={[]}
      lead={{ name: 'lead', timeS, tempC }}
      wood={woodOf(wood)}
      nowS={nowS}
      xMaxS={Math.max(band.at(-1)?.timeS ?? 0, nowS ?? 0)}
      widthPx={392}
      heightPx={isLow ? 96 : 152}
      woodShare={0.3}
      className="h-full w-full"
    />
  )
})

/** Without wood yet, a column of raw wood keeps its place in the row. */
function woodOf(wood: Sketch['wood']) {
  const { timesS, depthsMm, log10Dose, toastDepthMm } = wood ?? {
    timesS: [0],
    depthsMm: [0, 15],
    log10Dose: [null, null],
    toastDepthMm: [0],
  }
  return {
    timesS,
    depthsMm,
    log10Dose: log10Dose.map((value) => value ?? -Infinity),
    isotherm100Mm: timesS.map(() => null),
    isotherm150Mm: timesS.map(() => null),
    toastDepthMm,
  }
}
