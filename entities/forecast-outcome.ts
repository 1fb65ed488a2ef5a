import { defineEntity, p } from '@mikro-orm/core'

export const ForecastOutcomeEntity = defineEntity({
  name: 'ForecastOutcome',
  tableName: 'forecast_outcomes',
  properties: {
    firingId: p.uuid().primary(),
    scoreNumber: p.integer().primary(),
    atS: p.double().fieldName('at_s'),
    forecastMinutes: p.double(),
    earliestMinutes: p.double(),
    latestMinutes: p.double().nullable(),
    reachedMinutes: p.double().nullable(),
    restedMinutes: p.double(),
    withinMinutes: p.double(),
    isWithin: p.boolean().nullable(),
  },
})
