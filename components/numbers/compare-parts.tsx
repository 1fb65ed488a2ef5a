import { Constants, Formula, Limit, Part, Worked } from '@/components/numbers/part'
import { formatDoseFigure, formatNumber, formatTempDifference } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'
import {
  CAPABILITY_LEAST_COUNT,
  capabilityInterval,
  individualsMovingRange,
  NELSON_RULE_WORDS,
  NELSON_RULES_ON,
  PROVISIONAL_LIMITS_BELOW,
} from '@/lib/science/control-chart'
import { cusumAverageRunLength } from '@/lib/science/cusum-run-length'
import { curveDeviation, dynamicTimeWarping } from '@/lib/science/curve'
import { ratioFromLog10 } from '@/lib/science/dose-ratio'
import { logDoseSummary } from '@/lib/science/log-dose-summary'
import { permutationTest } from '@/lib/science/permutation'
import { oneWayAnova } from '@/lib/science/statistics'
import { varianceComponentEstimates } from '@/lib/science/variance-components'

/** Invented doses, minutes, of nine barrels fired by three toasters in turn. */
const doses = [
  [24.1, 26.0, 25.2],
  [27.9, 29.4, 27.1],
  [25.0, 24.4, 26.9],
]
const logs = doses.map((group) => group.map((doseMin) => Math.log10(doseMin)))

export function Comparing({ unit }: { unit: TemperatureUnit }) {
  const planned = [120, 150, 180, 190, 190, 190]
  const fired = [120, 144, 176, 191, 192, 189]
  const deviation = curveDeviation(planned, fired)
  const difference = (valueC: number) => formatTempDifference(valueC, unit, 1)
  return (
    <Part id="comparing" title="Comparing curves">
      <p>
        Firings are laid stage upon stage before they are compared, so that a stage which ran long does not
        look hot. The distance is then the root mean square of the differences. Two others look for likeness:
        warping lets a climb come a little sooner or later inside a narrow band of time; the discrete Fréchet
        distance is the furthest apart that two curves walked together must come. Only curves of one probe
        place are compared.
      </p>
      <Formula>{`RMS = square root of the mean of (fired - plan)²
warping = least sum of |a - b| along a path that never turns back`}</Formula>
      <Worked>
        Six readings {fired.join(', ')} against a plan of {planned.join(', ')} °C: RMS{' '}
        {difference(deviation.rmse)}, on the mean {difference(deviation.bias)}, at most{' '}
        {difference(deviation.maxAbs)} apart; warped,{' '}
        {difference((dynamicTimeWarping(planned, fired, 1) ?? Number.NaN) / planned.length)} a reading.
      </Worked>
      <Limit>
        The nearest firings are found by a bound that is never above the true distance, so the list is the
        same as if every firing had been compared. Warping with a band: Sakoe and Chiba 1978; Fréchet: Eiter
        and Mannila 1994; bounds: Keogh and others 2001, 2005.
      </Limit>
    </Part>
  )
}

export function Charts() {
  const series = logs.flat()
  const chart = individualsMovingRange(series)
  const capability = capabilityInterval({ usl: 0.12, lsl: -0.12, mean: 0.01, sd: 0.03, n: 40, alpha: 0.05 })
  const runLength = cusumAverageRunLength({ k: 0.5, h: 5, shiftSigma: 0 })
  return (
    <Part id="charts" title="Charts and capability">
      <p>
        Charts run in firing order within one recipe version, probe place and hearth, always on log10 dose.
        The limits come from what neighbours differ by, not from the spread of all; below{' '}
        {PROVISIONAL_LIMITS_BELOW} firings they are provisional. Slow drifts show sooner in two sums: an
        average that forgets (EWMA) and one that adds up (CUSUM).
      </p>
      <Formula>{`limits = mean ± 3 × mean moving range / 1.128
EWMA z = L x + (1 - L) z before, L 0.2 to 0.3
CUSUM high = max(0, high + x - target - k), k ½ sigma, signal at h 4 to 5 sigma
Cp = (upper - lower) / 6 sigma, Cpk = nearer limit from the mean / 3 sigma`}</Formula>
      <Worked>
        Nine invented barrels of {formatDoseFigure(ratioFromLog10(chart.mean))} min: limits{' '}
        {formatDoseFigure(ratioFromLog10(chart.lcl))} to {formatDoseFigure(ratioFromLog10(chart.ucl))} min. A
        CUSUM with k ½ and h 5 gives a false alarm once in {formatNumber(runLength)} firings. Forty firings
        0.01 off centre with sd 0.03 inside ±0.12: Cpk {formatNumber(capability.cpk.value, 2)} (
        {formatNumber(capability.cpk.low, 2)} to {formatNumber(capability.cpk.high, 2)}).
      </Worked>
      <Constants
        of="rules of the charts"
        rows={([1, 2, 3, 4, 5, 6, 7, 8] as const).map((rule) => ({
          name: `Rule ${rule}`,
          value: NELSON_RULES_ON.includes(rule) ? 'on' : 'off',
          source: NELSON_RULE_WORDS[rule],
        }))}
      />
      <Limit>
        A capability is refused below {CAPABILITY_LEAST_COUNT} firings. Rules: Nelson 1984; charts:
        NIST/SEMATECH e-Handbook 6.3; capability intervals: Montgomery, and Bissell 1990 (from memory).
      </Limit>
    </Part>
  )
}

export function Groups() {
  const all = logDoseSummary(doses.flat())
  const anova = oneWayAnova(logs)
  const share = varianceComponentEstimates(logs).intraclass
  const permutation = permutationTest(logs, { question: 'f' })
  const percent = (value: number) => `${formatNumber(100 * value)} %`
  return (
    <Part id="groups" title="Groups of firings">
      <p>
        A batch’s dose is its geometric mean with the spread, each with its interval. Whether toasters,
        hearths or lots differ is asked by comparing the spread between groups with the spread within; small
        groups are also asked by dealing their firings out anew in every possible way. When no difference can
        be shown, the page says so, and ranks nobody.
      </p>
      <Formula>F = mean square between / mean square within, on log10 dose</Formula>
      <Worked>
        Three invented groups of three: {formatDoseFigure(all.geometricMeanMin)} min
        {all.geometricMeanIntervalMin === null
          ? ''
          : ` (${formatDoseFigure(all.geometricMeanIntervalMin.low)} to ${formatDoseFigure(all.geometricMeanIntervalMin.high)})`}
        , spread {all.spreadPercent === null ? 'unknown' : `${formatNumber(all.spreadPercent.value)} %`}. F{' '}
        {formatNumber(anova.f, 2)}, p {formatNumber(anova.p, 3)}; dealt out anew in {permutation.count} ways,
        p {formatNumber(permutation.p, 3)}. Of the variance {percent(share.value)} lies between groups, but
        nine firings say no more than {percent(share.low)} to {percent(share.high)}.
      </Worked>
      <Limit>
        Intervals are 95 % unless they say otherwise. Published spread within commercial barrel lots averaged
        27 % (15 to 40 %) for seven volatiles in wine (Towey and Waterhouse 1996); toasting is only a part of
        it.
      </Limit>
    </Part>
  )
}
