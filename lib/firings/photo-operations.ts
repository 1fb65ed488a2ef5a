import * as z from 'zod'
import { rolesWith } from '@/lib/auth/permissions'
import { photoBytesAtMost, photoSizes } from '@/lib/firings/photo-kinds'
import {
  addPhotoQuery,
  describePhotoSchema,
  photoListSchema,
  photoSchema,
  removePhotoSchema,
} from '@/lib/firings/photo-schema'
import { defineOperation } from '@/lib/http/operation'

const idParams = z.object({ id: z.uuid() })
const tag = 'firings'
const follow = rolesWith('firings:follow')
const run = rolesWith('firings:run trial')

export const operations = {
  listPhotos: defineOperation({
    id: 'listPhotos',
    method: 'GET',
    path: '/api/firings/{id}/photos',
    summary: 'The photos of a firing; of a removed one who removed it, when and why',
    tag,
    access: follow,
    atDevice: 'by pin',
    params: idParams,
    response: photoListSchema,
  }),
  addPhoto: defineOperation({
    id: 'addPhoto',
    method: 'POST',
    path: '/api/firings/{id}/photos',
    summary: 'Add a photo: the picture as the body, at most 15 MB and 12 a firing; its metadata is not kept',
    tag,
    access: run,
    atDevice: 'by pin',
    params: idParams,
    query: addPhotoQuery,
    fileBody: ['image/jpeg', 'image/png', 'image/webp'],
    bodyLimit: photoBytesAtMost,
    response: photoSchema,
    status: 201,
  }),
  describePhoto: defineOperation({
    id: 'describePhoto',
    method: 'PUT',
    path: '/api/photos/{id}',
    summary: 'Put right what a photo is said to show',
    tag,
    access: run,
    atDevice: 'by pin',
    params: idParams,
    body: describePhotoSchema,
    response: photoSchema,
  }),
  removePhoto: defineOperation({
    id: 'removePhoto',
    method: 'POST',
    path: '/api/photos/{id}/remove',
    summary: 'Remove a photo with a reason; its picture is erased, its row stays',
    tag,
    access: run,
    atDevice: 'by pin',
    params: idParams,
    body: removePhotoSchema,
    response: photoSchema,
  }),
  openPhoto: defineOperation({
    id: 'openPhoto',
    method: 'GET',
    path: '/api/photos/{id}/{size}',
    summary: 'The picture itself, for who may read its firing',
    tag,
    access: follow,
    atDevice: 'by pin',
    params: z.object({ id: z.uuid(), size: z.enum(photoSizes) }),
    responseType: 'image/jpeg',
  }),
}
