import * as z from 'zod'
import { defineOperation } from '@/lib/http/operation'

export const operations = {
  getOpenApi: defineOperation({
    id: 'getOpenApi',
    method: 'GET',
    path: '/api/openapi.json',
    summary: 'This document',
    tag: 'About',
    access: 'public',
    response: z.looseObject({ openapi: z.string() }),
  }),
}
