import * as z from 'zod'
import {
  alarmFiltersSchema,
  alarmPageSchema,
  alarmRatesSchema,
  alarmSchema,
  listAlarmsQuery,
  shelveAlarmSchema,
} from '@/lib/alarms/schema'
import { rolesWith } from '@/lib/auth/permissions'
import { defineOperation } from '@/lib/http/operation'

const idParams = z.object({ id: z.uuid() })
const tag = 'Alarms'

export const operations = {
  listAlarms: defineOperation({
    id: 'listAlarms',
    method: 'GET',
    path: '/api/alarms',
    summary: 'Alarms that came, newest first; a toaster gets those of their own firings',
    tag,
    access: rolesWith('alarms:read'),
    query: listAlarmsQuery,
    response: alarmPageSchema,
  }),
  exportAlarms: defineOperation({
    id: 'exportAlarms',
    method: 'GET',
    path: '/api/alarms.csv',
    summary: 'The same as CSV, whole',
    tag,
    access: rolesWith('alarms:read'),
    query: alarmFiltersSchema,
    responseType: 'text/csv',
  }),
  getAlarmRates: defineOperation({
    id: 'getAlarmRates',
    method: 'GET',
    path: '/api/alarm-rates',
    summary:
      'How often alarms came, by toaster with hours and by alarm; chattering, standing and shelved ones',
    tag,
    access: rolesWith('alarms:read'),
    query: alarmFiltersSchema,
    response: alarmRatesSchema,
  }),
  acknowledgeAlarm: defineOperation({
    id: 'acknowledgeAlarm',
    method: 'POST',
    path: '/api/alarms/{id}/acknowledge',
    summary: 'Take note of an alarm ("Seen"); a second time changes nothing',
    tag,
    access: rolesWith('firings:run trial'),
    atDevice: 'by pin',
    params: idParams,
    response: alarmSchema,
  }),
  shelveAlarm: defineOperation({
    id: 'shelveAlarm',
    method: 'POST',
    path: '/api/alarms/{id}/shelve',
    summary: 'Put an alarm away for some minutes, with a reason; it comes back by itself',
    tag,
    access: rolesWith('alarms:shelve'),
    atDevice: 'by pin',
    params: idParams,
    body: shelveAlarmSchema,
    response: alarmSchema,
  }),
  unshelveAlarm: defineOperation({
    id: 'unshelveAlarm',
    method: 'POST',
    path: '/api/alarms/{id}/unshelve',
    summary: 'Take a shelved alarm back before its time',
    tag,
    access: rolesWith('alarms:shelve'),
    atDevice: 'by pin',
    params: idParams,
    response: alarmSchema,
  }),
}
