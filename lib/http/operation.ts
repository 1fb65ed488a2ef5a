import type * as z from 'zod'
import type { Role } from '@/lib/auth/actor'

export type Method = 'GET' | 'POST' | 'PUT' | 'DELETE'

/**
 * Who may call: 'public' (no session), 'gateway' (device token), 'device' (an enrolled tablet's cookie), or the roles
 * that can ever succeed.
 */
export type Access = 'public' | 'gateway' | 'device' | readonly Role[]

/**
 * At an enrolled device: 'by pin' lets in those of the roles that are signed in there by PIN; 'alone' the device with
 * nobody signed in as well. Left out, neither.
 */
export type AtDevice = 'by pin' | 'alone'

/** One route as data: the source of its validation, its line in the OpenAPI document and its row in the access test. */
export type Operation<Params, Query, Body> = {
  id: string
  method: Method
  /** As OpenAPI writes it: /api/recipes/{id}/versions */
  path: string
  summary: string
  tag: string
  access: Access
  atDevice?: AtDevice
  params?: z.ZodType<Params>
  query?: z.ZodType<Query>
  body?: z.ZodType<Body>
  /** Content types of a body that is a file and no JSON; the handler reads it, and tells its type by its content. */
  fileBody?: readonly string[]
  /** Bytes; default 256 KiB. */
  bodyLimit?: number
  response?: z.ZodType
  responseType?: 'application/json' | 'text/csv' | 'text/javascript' | 'application/pdf' | 'image/jpeg'
  /** Status of success; default 200, 204 without a response schema. */
  status?: number
}

export type AnyOperation = Operation<unknown, unknown, unknown>

/** Keeps the schemas' types while the operation is written as data. */
export function defineOperation<Params = undefined, Query = undefined, Body = undefined>(
  operation: Operation<Params, Query, Body>,
): Operation<Params, Query, Body> {
  return operation
}
