import * as z from 'zod'
import { rolesWith } from '@/lib/auth/permissions'
import { defineOperation } from '@/lib/http/operation'
import {
  addPlacementSchema,
  listStudiesQuery,
  signStudySchema,
  startStudySchema,
  strikePlacementSchema,
  studyPageSchema,
  studySchema,
} from '@/lib/probes/study-schema'

const idParams = z.object({ id: z.uuid() })
const placementParams = z.object({ id: z.uuid(), placementId: z.uuid() })
const tag = 'checks'
const write = rolesWith('checks:write')

export const operations = {
  listStudies: defineOperation({
    id: 'listRepeatabilityStudies',
    method: 'GET',
    path: '/api/repeatability-studies',
    summary: 'Studies of repeat placements, newest first',
    tag,
    access: rolesWith('checks:read'),
    query: listStudiesQuery,
    response: studyPageSchema,
  }),
  startStudy: defineOperation({
    id: 'startRepeatabilityStudy',
    method: 'POST',
    path: '/api/repeatability-studies',
    summary: 'Begin a study: one probe placed again and again beside another that stays',
    tag,
    access: write,
    body: startStudySchema,
    response: studySchema,
    status: 201,
  }),
  getStudy: defineOperation({
    id: 'getRepeatabilityStudy',
    method: 'GET',
    path: '/api/repeatability-studies/{id}',
    summary: 'One study with its placements and what they say',
    tag,
    access: rolesWith('checks:read'),
    params: idParams,
    response: studySchema,
  }),
  addPlacement: defineOperation({
    id: 'addRepeatabilityPlacement',
    method: 'POST',
    path: '/api/repeatability-studies/{id}/placements',
    summary:
      'Add a placement, by eye or from both probes’ settled readings; the same id again changes nothing',
    tag,
    access: write,
    params: idParams,
    body: addPlacementSchema,
    response: studySchema,
    status: 201,
  }),
  strikePlacement: defineOperation({
    id: 'strikeRepeatabilityPlacement',
    method: 'POST',
    path: '/api/repeatability-studies/{id}/placements/{placementId}/strike',
    summary: 'Strike out a placement that went wrong, with its reason',
    tag,
    access: write,
    params: placementParams,
    body: strikePlacementSchema,
    response: studySchema,
  }),
  finishStudy: defineOperation({
    id: 'finishRepeatabilityStudy',
    method: 'POST',
    path: '/api/repeatability-studies/{id}/finish',
    summary: 'End a study with its result, by signature; five placements at least',
    tag,
    access: write,
    params: idParams,
    body: signStudySchema,
    response: studySchema,
  }),
  abandonStudy: defineOperation({
    id: 'abandonRepeatabilityStudy',
    method: 'POST',
    path: '/api/repeatability-studies/{id}/abandon',
    summary: 'End a study without a result',
    tag,
    access: write,
    params: idParams,
    body: strikePlacementSchema,
    response: studySchema,
  }),
  adoptStudy: defineOperation({
    id: 'adoptRepeatabilityStudy',
    method: 'POST',
    path: '/api/repeatability-studies/{id}/adopt',
    summary: 'Make a finished study the site’s own figure, by signature: a new version of the settings',
    tag,
    access: rolesWith('repeatability:adopt'),
    params: idParams,
    body: signStudySchema,
    response: studySchema,
  }),
}
