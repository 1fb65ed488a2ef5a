import { roundTicks } from '@/components/chart/round-ticks'
import type { CorrectionPoint } from '@/components/probes/correction-scale'
import { correctionDomain, linearScale } from '@/components/probes/correction-scale'
import { formatInstant, formatSigned } from '@/lib/format'

const size = { width: 460, height: 220, left: 44, right: 62, top: 12, bottom: 28 } as const
const names = { ice: 'ice', boiling: 'boiling', block: 'block' } as const

type Frame = { x: (value: number) => number; y: (value: number) => number; domain: readonly [number, number] }

function frameOf(xDomain: readonly [number, number], points: readonly CorrectionPoint[]): Frame {
  const domain = correctionDomain(points)
  return {
    x: linearScale(xDomain, [size.left, size.width - size.right]),
    y: linearScale(domain, [size.height - size.bottom, size.top]),
    domain,
  }
}

/** Correction against the probe's reading: the newest points with their line, older ones faint. */
export function CorrectionByTemperature({
  points,
  line,
  unitName,
}: {
  points: readonly CorrectionPoint[]
  /** The correction in force, in the person's unit; straight pieces. */
  line: readonly { atTemp: number; correction: number; isInside: boolean }[]
  unitName: string
}) {
  const temps = line.map((one) => one.atTemp)
  const xDomain = [Math.min(...temps), Math.max(...temps)] as const
  const frame = frameOf(xDomain, points)
  const path = (isInside: boolean) =>
    line
      .slice(1)
      .map((to, index) => ({ from: line[index], to }))
      .filter(({ from, to }) => from !== undefined && (from.isInside && to.isInside) === isInside)
      .map(({ from, to }) =>
        from === undefined
          ? ''
          : `M${frame.x(from.atTemp)} ${frame.y(from.correction)}L${frame.x(to.atTemp)} ${frame.y(to.correction)}`,
      )
      .join('')
  return (
    <Chart
      title="Correction against temperature"
      frame={frame}
      unitName={unitName}
      xTicks={roundTicks(...xDomain, 5).map((tick) => ({ at: frame.x(tick), words: `${tick}°` }))}
    >
      <path d={path(true)} className="stroke-text" strokeWidth={1.6} fill="none" />
      <path d={path(false)} className="stroke-text" strokeWidth={1.2} strokeDasharray="4 4" fill="none" />
      {points.map((point, index) => (
        <Stem key={index} point={point} x={frame.x(point.atTemp)} frame={frame} />
      ))}
    </Chart>
  )
}

/** Correction against the day of the check, a line a kind, its name at its end. */
export function CorrectionByTime({
  points,
  zone,
  unitName,
}: {
  points: readonly CorrectionPoint[]
  zone: string
  unitName: string
}) {
  const times = points.map((point) => point.atMs)
  const [first, last] = [Math.min(...times), Math.max(...times)]
  const air = Math.max((last - first) * 0.06, 86_400_000)
  const frame = frameOf([first - air, last + air], points)
  const ends = last === first ? [last] : [first, last]
  return (
    <Chart
      title="Correction against time"
      frame={frame}
      unitName={unitName}
      xTicks={ends.map((at) => ({ at: frame.x(at), words: formatInstant(at, zone, 'date') }))}
    >
      {(['ice', 'boiling', 'block'] as const).map((kind) => (
        <KindLine key={kind} points={points.filter((point) => point.kind === kind)} frame={frame} />
      ))}
      <EndNames points={points} frame={frame} />
    </Chart>
  )
}

function KindLine({ points, frame }: { points: readonly CorrectionPoint[]; frame: Frame }) {
  const inTime = [...points].sort((a, b) => a.atMs - b.atMs)
  const path = inTime
    .map((point, index) => `${index === 0 ? 'M' : 'L'}${frame.x(point.atMs)} ${frame.y(point.correction)}`)
    .join('')
  return (
    <>
      <path d={path} className="stroke-text" strokeWidth={1.2} fill="none" />
      {inTime.map((point, index) => (
        <Stem key={index} point={point} x={frame.x(point.atMs)} frame={frame} />
      ))}
    </>
  )
}

/** Names stand at the lines' ends, pushed apart where they would lie over one another. */
function EndNames({ points, frame }: { points: readonly CorrectionPoint[]; frame: Frame }) {
  const ends = (['ice', 'boiling', 'block'] as const)
    .flatMap((kind) => {
      const newest = points
        .filter((point) => point.kind === kind)
        .sort((a, b) => b.atMs - a.atMs || b.atTemp - a.atTemp)[0]
      return newest === undefined ? [] : [{ kind, y: frame.y(newest.correction) }]
    })
    .sort((a, b) => a.y - b.y)
  let floor = -Infinity
  return ends.map(({ kind, y }) => {
    floor = Math.max(y, floor + 15)
    return (
      <text key={kind} x={size.width - size.right + 8} y={floor + 4} className="fill-soft text-[13px]">
        {names[kind]}
      </text>
    )
  })
}

/** A point with its uncertainty as a short stem through it. */
function Stem({ point, x, frame }: { point: CorrectionPoint; x: number; frame: Frame }) {
  const tone = point.isNewest ? 'stroke-text' : 'stroke-mute'
  return (
    <g className={tone}>
      <line
        x1={x}
        x2={x}
        y1={frame.y(point.correction - point.half)}
        y2={frame.y(point.correction + point.half)}
        strokeWidth={1}
      />
      <circle
        cx={x}
        cy={frame.y(point.correction)}
        r={3.5}
        className={point.isNewest ? 'fill-text' : 'fill-ground'}
        strokeWidth={1.2}
      />
    </g>
  )
}

function Chart({
  title,
  frame,
  unitName,
  xTicks,
  children,
}: {
  title: string
  frame: Frame
  unitName: string
  xTicks: readonly { at: number; words: string }[]
  children: React.ReactNode
}) {
  const ticks = roundTicks(...frame.domain, 4)
  const decimals = Math.max(0, ...ticks.map((tick) => (Number.isInteger(tick) ? 0 : 1)))
  return (
    <figure className="min-w-0">
      <figcaption className="text-small text-soft">
        {title}, {unitName}
      </figcaption>
      <svg
        viewBox={`0 0 ${size.width} ${size.height}`}
        className="block w-full max-w-[34rem]"
        role="img"
        aria-label={`${title}; the figures stand in the table of checks`}
      >
        {ticks.map((tick) => (
          <g key={tick}>
            <line
              x1={size.left}
              x2={size.width - size.right}
              y1={frame.y(tick)}
              y2={frame.y(tick)}
              className={tick === 0 ? 'stroke-edge' : 'stroke-line'}
              strokeWidth={1}
            />
            <text x={size.left - 8} y={frame.y(tick) + 4} textAnchor="end" className="fill-soft text-[13px]">
              {formatSigned(tick, decimals)}
            </text>
          </g>
        ))}
        {xTicks.map((tick, index) => (
          <text
            key={index}
            x={tick.at}
            y={size.height - 8}
            textAnchor="middle"
            className="fill-soft text-[13px]"
          >
            {tick.words}
          </text>
        ))}
        {children}
      </svg>
    </figure>
  )
}
