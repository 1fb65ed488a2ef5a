import { Table } from '@/components/ui/table'
import { formatCount } from '@/lib/format'
import type { FitPicture } from '@/lib/markers/schema'
import type { MarkerFamily } from '@/lib/science/marker-families'
import { markerFamilies } from '@/lib/science/marker-families'
import { threeDigits } from '@/lib/science/three-digits'
import { FitPlot } from './fit-plot'
import { ResidualPlot } from './residual-plot'

/** A fit: curve and residuals, parameters with intervals, and what it is in a sentence. */
export function FitReport({ picture, name, unit }: { picture: FitPicture; name: string; unit: string }) {
  const { fit } = picture
  const family: MarkerFamily = markerFamilies[fit.family]
  return (
    <div className="space-y-4">
      <div className="grid gap-x-9 gap-y-4 lg:grid-cols-[8fr_5fr]">
        <FitPlot picture={picture} name={name} unit={unit} />
        <ResidualPlot picture={picture} unit={unit} />
      </div>
      <div className="grid gap-x-9 gap-y-4 lg:grid-cols-[8fr_5fr]">
        <div>
          <p className="mb-2">
            {family.name}: <code>{family.formula}</code>
          </p>
          <Table
            caption="Parameters of the fit"
            rows={fit.parameters}
            rowKey={(parameter) => parameter.name}
            columns={[
              {
                key: 'name',
                head: 'Parameter',
                isRowHead: true,
                cell: (parameter) => (
                  <>
                    <code>{parameter.name}</code>{' '}
                    <span className="text-soft">{parameterOf(family, parameter.name)?.meaning}</span>
                  </>
                ),
              },
              {
                key: 'value',
                head: 'Value',
                isNumeric: true,
                cell: (parameter) => threeDigits(parameter.value),
              },
              {
                key: 'interval',
                head: '95 % interval',
                isNumeric: true,
                cell: (parameter) => `${threeDigits(parameter.low)} to ${threeDigits(parameter.high)}`,
              },
              {
                key: 'unit',
                head: 'Unit',
                cell: (parameter) => (parameterOf(family, parameter.name)?.unit ?? '').replace('U', unit),
              },
            ]}
          />
        </div>
        <p className="max-w-[44ch] text-soft">
          {formatCount(fit.count, 'result')}
          {fit.belowLimitCount === 0 ? '' : `, ${fit.belowLimitCount} below the limit and counted as that`}.
          Residual spread {threeDigits(fit.residualSd)} {unit} with{' '}
          {formatCount(fit.degreesOfFreedom, 'degree')} of freedom. By {fit.method}, errors taken as normal
          and of one size. The shape is empirical: it holds between these results and says nothing outside
          them.
        </p>
      </div>
    </div>
  )
}

function parameterOf(family: MarkerFamily, name: string) {
  return family.parameters.find((parameter) => parameter.name === name)
}
