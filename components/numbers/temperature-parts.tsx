import { Formula, Limit, Part, Worked } from '@/components/numbers/part'
import { Table } from '@/components/ui/table'
import { formatNumber, formatTemp, formatTempDifference } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { boilingPointC, standardPressurePa } from '@/lib/science/steam'
import type { ThermocoupleType } from '@/lib/science/thermocouple'
import { compensatedTempC, emfMv, toleranceC } from '@/lib/science/thermocouple'

type Props = { unit: TemperatureUnit }

const types: readonly ThermocoupleType[] = ['K', 'N', 'J', 'T']
const classes = [1, 2, 3] as const

/** From the voltage at the gateway’s terminals to the wood’s temperature. */
export function Thermocouples({ unit }: Props) {
  const measuredMv = 7.5
  const coldC = 28
  return (
    <Part id="temperature" title="Temperature from a probe">
      <p>
        A probe makes a voltage from the difference between its tip and the terminals that it ends in. What
        the terminals’ own temperature would have made is added back, as a voltage and never as degrees; the
        sum is read backwards through the published curve of the probe’s type, to a millionth of a degree.
      </p>
      <Formula>E = E measured + E(terminals), T = the temperature at which the type makes E</Formula>
      <Worked>
        A type K probe reads {formatNumber(measuredMv, 3)} mV while its terminals are at{' '}
        {formatTemp(coldC, unit)}. They would make {formatNumber(emfMv('K', coldC), 3)} mV; the sum,{' '}
        {formatNumber(measuredMv + emfMv('K', coldC), 3)} mV, is{' '}
        {formatTemp(compensatedTempC('K', measuredMv, coldC), unit, 1)}.
      </Worked>
      <Table
        caption="Limits of error of a new probe"
        isCaptionShown
        rows={types}
        rowKey={(type) => type}
        columns={[
          { key: 'type', head: 'Type', isRowHead: true, cell: (type) => type },
          ...classes.map((iecClass) => ({
            key: String(iecClass),
            head: `Class ${iecClass} at`,
            unit: formatTemp(200, unit),
            isNumeric: true,
            cell: (type: ThermocoupleType) => {
              const limitC = toleranceC(type, iecClass, 200)
              return limitC === null ? 'no claim' : `±${formatTempDifference(limitC, unit, 1)}`
            },
          })),
        ]}
      />
      <Limit>
        Out of the type’s range, an open wire or no number at all is NO READING, never a figure. Curves:
        ITS-90 (NIST Monograph 175, the same in IEC 60584-1); limits of error: IEC 60584-1.
      </Limit>
    </Part>
  )
}

/** Checks at ice, boiling water and a hot block. */
export function ProbeChecks({ unit }: Props) {
  const stationHpa = 1000
  const altitudeM = 300
  return (
    <Part id="checks" title="Probe checks and correction">
      <p>
        A probe is held against what is known: ice at {formatTemp(0, unit)}, boiling water at the day’s
        station pressure, and for a lead probe a block or reference between {formatTemp(180, unit)} and{' '}
        {formatTemp(230, unit)}, because the dose is made there. The correction is a straight line from point
        to point.
      </p>
      <Formula>corrected = reading + (reference - reading at the check), straight between points</Formula>
      <Worked>
        At {formatNumber(stationHpa)} hPa water boils at {formatTemp(boilingPointC(stationHpa), unit, 2)}. The
        standard atmosphere gives {formatNumber(standardPressurePa(altitudeM) / 100, 0)} hPa at {altitudeM} m,
        where it boils at {formatTemp(boilingPointC(standardPressurePa(altitudeM) / 100), unit, 2)}: use the
        day’s pressure where you can.
      </Worked>
      <Limit>
        Beyond the checked span, or after a check is due, no tighter claim is made than the probe’s class.
        Boiling point: IAPWS-IF97 saturation line; pressure by height: ICAO standard atmosphere.
      </Limit>
    </Part>
  )
}
