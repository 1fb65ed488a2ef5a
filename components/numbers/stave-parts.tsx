import { Constants, Formula, Limit, Part, Worked } from '@/components/numbers/part'
import { formatDoseFigure, formatNumber, formatTemp } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import { siteStaveOptions } from '@/lib/recipes/stave-of'
import { planCurve } from '@/lib/science/plan'
import type { SiteRules } from '@/lib/science/site-rules'
import { doseAtDepth, faceTempC, roundDepthForShowMm, staveHistory, toastDepthMm } from '@/lib/science/stave'
import {
  conductivityWPerMK,
  densityKgPerM3,
  equilibriumMoisturePercent,
  heatCapacityJPerKgK,
} from '@/lib/science/wood'

type Props = { rules: SiteRules; unit: TemperatureUnit }

const probeDepthMm = 2
const shownDepthsMm = [0, 2, 5, 10]

/** The stave after a climb to 190 °C at 2 mm in 15 min and 20 min of hold. */
function workedStave(rules: SiteRules) {
  return staveHistory({
    points: planCurve(60, [
      { kind: 'ramp', targetTempC: 190, durationS: 900 },
      { kind: 'hold', targetTempC: 190, durationS: 1200 },
    ]),
    columns: 2,
    thicknessMm: rules.stave.thicknessMm,
    probeDepthMm,
    moisturePercent: rules.stave.moisturePercent,
    ...siteStaveOptions(rules),
  }).final
}

export function Stave({ rules, unit }: Props) {
  const { stave } = rules
  const state = workedStave(rules)
  const face = faceTempC(state)
  const depth = toastDepthMm(state)
  const mm = (value: number) => formatNumber(roundDepthForShowMm(value), 1)
  return (
    <Part id="stave" title="Inside the stave (model)">
      <p>
        Nobody can see the dose inside the wood, so it is computed: heat is conducted through the thickness
        from the lead probe’s reading, imposed at its depth, to the cold face, which loses heat to the room.
        Moisture dries out on the way and takes its heat with it, once.
      </p>
      <Formula>{`C dT/dt = d/dx (k dT/dx) - heat of drying
k = G (0.1941 + 0.004064 M) + 0.01864 W/(m K), +0.25 % for each °C above 24
C dry = 0.1031 + 0.003867 T kJ/(kg K), T in kelvin, and the bound water's part
density = 1000 G (1 + M / 100) kg/m³`}</Formula>
      <Worked>
        Wood at {probeDepthMm} mm taken to {formatTemp(190, unit)} in 15 min and held 20: the face stands at
        about {formatTemp(face.value, unit)} ({formatTemp(face.low, unit)} to {formatTemp(face.high, unit)}).
        Dose at {shownDepthsMm.map((at) => `${at} mm ${formatDoseFigure(doseAtDepth(state, at))}`).join(', ')}{' '}
        min. Toast depth {mm(depth.value)} mm ({mm(depth.low)} to {mm(depth.high)}). This wood: k{' '}
        {formatNumber(conductivityWPerMK(stave.specificGravity, stave.moisturePercent), 3)} W/(m K), heat
        capacity {formatNumber(heatCapacityJPerKgK(373.15, stave.moisturePercent) / 1000, 2)} kJ/(kg K) at{' '}
        {formatTemp(100, unit)}, density{' '}
        {formatNumber(densityKgPerM3(stave.specificGravity, stave.moisturePercent))} kg/m³.
      </Worked>
      <p>
        <strong>Toast depth</strong> is the deepest wood whose dose is at least{' '}
        {formatNumber(stave.toastDepthDoseMin, 2)} min, shown to half a millimetre. Its range comes from the
        probe’s depth, the wood’s diffusivity and the probe’s error.
      </p>
      <Constants
        of="the stave"
        rows={[
          {
            name: 'Specific gravity G',
            value: formatNumber(stave.specificGravity, 2),
            source: 'oak 0.60 to 0.72; this site’s settings, or the wood lot’s',
          },
          {
            name: 'Moisture M when not measured',
            value: `${formatNumber(stave.moisturePercent)} %`,
            source: 'this site’s settings',
          },
          {
            name: 'Thickness when the recipe has none',
            value: `${formatNumber(stave.thicknessMm)} mm`,
            source: 'this site’s settings',
          },
          {
            name: 'Cold face to room',
            value: `${formatNumber(stave.coldFaceHWPerM2K)} W/(m² K)`,
            source: '8 to 15, judgement',
          },
          { name: 'Room', value: formatTemp(stave.roomTempC, unit), source: 'this site’s settings' },
          {
            name: 'Heat of drying',
            value: '2.26 MJ/kg',
            source: 'water near boiling, charged from 95 to 135 °C',
          },
          {
            name: 'Probe’s depth',
            value: `±${formatNumber(stave.probeDepthErrorMm, 1)} mm`,
            source: 'judgement',
          },
          {
            name: 'Diffusivity',
            value: `±${formatNumber(stave.diffusivityErrorShare * 100)} %`,
            source: 'judgement',
          },
        ]}
      />
      <Limit>
        A model, and marked as one wherever it is drawn: to be calibrated on cut offcuts. The conductivity
        formula ends at 25 % moisture; wetter wood is marked. Wood properties: Wood Handbook, FPL-GTR-282,
        chapter 4.
      </Limit>
    </Part>
  )
}

export function Moisture({ unit }: { unit: TemperatureUnit }) {
  return (
    <Part id="moisture" title="Stave moisture">
      <p>
        Oven-dry: what the wet piece weighs above the dry one, as a share of the dry. A meter’s figure is kept
        with its method. Wood left in one climate settles at the equilibrium moisture of that air.
      </p>
      <Formula>M = 100 × (wet mass - oven-dry mass) / oven-dry mass</Formula>
      <Worked>
        Air of {formatTemp(20, unit)} and 65 % humidity: {formatNumber(equilibriumMoisturePercent(20, 65), 1)}{' '}
        %.
      </Worked>
      <Limit>
        Hailwood and Horrobin’s formula with the Wood Handbook’s coefficients: ±0.06 against its own table.
      </Limit>
    </Part>
  )
}
