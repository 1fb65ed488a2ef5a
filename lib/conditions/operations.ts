import * as z from 'zod'
import { rolesWith } from '@/lib/auth/permissions'
import {
  airReadingSchema,
  dayPageSchema,
  daySchema,
  exposurePreviewSchema,
  exposureReadingSchema,
  exposureUploadSchema,
  getDayQuery,
  listDaysQuery,
  previewExposureFileSchema,
  recordAirSchema,
  recordExposureSchema,
  removeReadingSchema,
  uploadExposureFileSchema,
} from '@/lib/conditions/schema'
import { defineOperation } from '@/lib/http/operation'

const idParams = z.object({ id: z.uuid() })
const tag = 'conditions'
const read = rolesWith('conditions:read')
const write = rolesWith('conditions:write')
/** A meter's file travels as text within JSON. */
const fileLimit = 2 * 1024 * 1024

export const operations = {
  getDay: defineOperation({
    id: 'getDay',
    method: 'GET',
    path: '/api/conditions',
    summary:
      'One day: air of room and yard, carbon monoxide and heat against the limits, its firings, what is missing',
    tag,
    access: read,
    query: getDayQuery,
    response: daySchema,
  }),
  listDays: defineOperation({
    id: 'listDays',
    method: 'GET',
    path: '/api/condition-days',
    summary: 'Days on which something was fired or kept, newest first',
    tag,
    access: read,
    query: listDaysQuery,
    response: dayPageSchema,
  }),
  recordAir: defineOperation({
    id: 'recordAir',
    method: 'POST',
    path: '/api/condition-readings',
    summary: 'Record temperature and humidity of the room or the yard',
    tag,
    access: write,
    body: recordAirSchema,
    response: airReadingSchema,
    status: 201,
  }),
  removeAir: defineOperation({
    id: 'removeAir',
    method: 'POST',
    path: '/api/condition-readings/{id}/remove',
    summary: 'Take a reading of the air back with a reason',
    tag,
    access: write,
    params: idParams,
    body: removeReadingSchema,
  }),
  recordExposure: defineOperation({
    id: 'recordExposure',
    method: 'POST',
    path: '/api/exposure-readings',
    summary: 'Record carbon monoxide or heat by hand: a record and a reminder, no alarm',
    tag,
    access: write,
    body: recordExposureSchema,
    response: exposureReadingSchema,
    status: 201,
  }),
  removeExposure: defineOperation({
    id: 'removeExposure',
    method: 'POST',
    path: '/api/exposure-readings/{id}/remove',
    summary: 'Take a reading of carbon monoxide or heat back with a reason',
    tag,
    access: write,
    params: idParams,
    body: removeReadingSchema,
  }),
  previewExposureFile: defineOperation({
    id: 'previewExposureFile',
    method: 'POST',
    path: '/api/exposure-files/preview',
    summary: 'What a meter’s CSV file would give, with every line that cannot be read; keeps nothing',
    tag,
    access: write,
    body: previewExposureFileSchema,
    bodyLimit: fileLimit,
    response: exposurePreviewSchema,
  }),
  uploadExposureFile: defineOperation({
    id: 'uploadExposureFile',
    method: 'POST',
    path: '/api/exposure-files',
    summary: 'Keep the readings of a meter’s CSV file; the same id again adds nothing',
    tag,
    access: write,
    body: uploadExposureFileSchema,
    bodyLimit: fileLimit,
    response: exposureUploadSchema,
    status: 201,
  }),
  removeExposureFile: defineOperation({
    id: 'removeExposureFile',
    method: 'POST',
    path: '/api/exposure-files/{id}/remove',
    summary: 'Take a meter’s file back with all its readings and a reason',
    tag,
    access: write,
    params: idParams,
    body: removeReadingSchema,
  }),
}
