import * as z from 'zod'
import { rolesWith } from '@/lib/auth/permissions'
import { defineOperation } from '@/lib/http/operation'
import {
  checkedFormulaSchema,
  checkFormulaSchema,
  fitMarkerSchema,
  fitPreviewSchema,
  markerDetailSchema,
  markerListSchema,
  predictMarkersQuery,
  previewFitSchema,
  saveFormulaSchema,
  versionMarkersSchema,
} from '@/lib/markers/schema'

const idParams = z.object({ id: z.uuid() })
const tag = 'markers'

export const operations = {
  listMarkers: defineOperation({
    id: 'listMarkers',
    method: 'GET',
    path: '/api/markers',
    summary: 'Markers with the response in force',
    tag,
    access: rolesWith('markers:read'),
    response: markerListSchema,
  }),
  getMarker: defineOperation({
    id: 'getMarker',
    method: 'GET',
    path: '/api/markers/{id}',
    summary: 'One marker with every response, the newest first',
    tag,
    access: rolesWith('markers:read'),
    params: idParams,
    response: markerDetailSchema,
  }),
  checkMarkerFormula: defineOperation({
    id: 'checkMarkerFormula',
    method: 'POST',
    path: '/api/markers/{id}/formula-check',
    summary:
      'Read a formula without storing it: its fault with the place, or what it gives for approved recipes',
    tag,
    access: rolesWith('markers:write'),
    params: idParams,
    body: checkFormulaSchema,
    response: checkedFormulaSchema,
  }),
  saveMarkerFormula: defineOperation({
    id: 'saveMarkerFormula',
    method: 'POST',
    path: '/api/markers/{id}/formulas',
    summary: 'Put a formula in force; 409 with the marker when another response was written meanwhile',
    tag,
    access: rolesWith('markers:write'),
    params: idParams,
    body: saveFormulaSchema,
    response: markerDetailSchema,
    status: 201,
  }),
  previewMarkerFit: defineOperation({
    id: 'previewMarkerFit',
    method: 'POST',
    path: '/api/markers/{id}/fit-preview',
    summary:
      'Look up and fit pasted results without storing them, with an error for each row that cannot be used',
    tag,
    access: rolesWith('markers:write'),
    params: idParams,
    body: previewFitSchema,
    response: fitPreviewSchema,
  }),
  fitMarker: defineOperation({
    id: 'fitMarker',
    method: 'POST',
    path: '/api/markers/{id}/fits',
    summary: 'Fit the response to results and put it in force',
    tag,
    access: rolesWith('markers:write'),
    params: idParams,
    body: fitMarkerSchema,
    response: markerDetailSchema,
    status: 201,
  }),
  predictMarkers: defineOperation({
    id: 'predictMarkers',
    method: 'GET',
    path: '/api/recipe-versions/{id}/markers',
    summary: 'Markers predicted for a recipe version, with intervals and what they rest on',
    tag,
    access: rolesWith('markers:read'),
    params: idParams,
    query: predictMarkersQuery,
    response: versionMarkersSchema,
  }),
}
