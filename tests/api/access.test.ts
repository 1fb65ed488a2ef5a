import { randomUUID } from 'node:crypto'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import type { Role } from '@/lib/auth/actor'
import { roles } from '@/lib/auth/actor'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { allOperations } from '@/lib/http/all-operations'
import type { AnyOperation, Method } from '@/lib/http/operation'
import { callRoute, listRouteFiles } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import type { TestDevice } from '@/tests/support/devices'
import { createTestDevice, createTestPinSession } from '@/tests/support/devices'
import type { TestPeople } from '@/tests/support/people'
import { createPeople, createTestSession } from '@/tests/support/people'

/**
 * Every route against every role, no session, a second customer, and an enrolled device with and without a person. The bodies are empty and the ids are of nothing,
 * so that nobody gets far; what is held is who is turned away, and that those who may are not.
 */

let database: TestDatabase
let people: TestPeople
let device: TestDevice

beforeAll(async () => {
  database = await createTestDatabase()
  people = await createPeople(database)
  device = await createTestDevice(people)
})

afterAll(async () => {
  await closeOrm()
  await database.drop()
})

function personOf(role: Role) {
  const by = {
    administrator: people.administrator,
    'master cooper': people.masterCooper,
    chemist: people.chemist,
    toaster: people.toaster,
    customer: people.customer,
  } as const
  return by[role]
}

/** A session of its own for each call: signing out, and ending a session, must not spoil the next row. */
async function freshCookie(accountId: string): Promise<string> {
  return (await createTestSession(accountId)).cookie
}

/** What an enrolled device may ask of a list that it sees a part of. */
const queryOf: Readonly<Record<string, string>> = { listPieces: '?show=waiting' }

function call(operation: AnyOperation, cookie: string | undefined, headers: Record<string, string> = {}) {
  const path = operation.path.replaceAll(/\{\w+\}/g, () => randomUUID()) + (queryOf[operation.id] ?? '')
  const body = operation.body === undefined ? undefined : {}
  return callRoute(operation.method, path, { cookie, body, headers })
}

const rows = allOperations.map((operation) => [`${operation.method} ${operation.path}`, operation] as const)
const guarded = rows.filter(([, operation]) => Array.isArray(operation.access))
const open = rows.filter(([, operation]) => operation.access === 'public')
const ofDevices = rows.filter(([, operation]) => operation.access === 'device')
const ofGateways = rows.filter(([, operation]) => operation.access === 'gateway')

function allowedRoles(operation: AnyOperation): readonly Role[] {
  return typeof operation.access === 'string' ? [] : operation.access
}

describe.each(guarded)('%s', (_name, operation) => {
  test('without a session is 401', async () => {
    expect((await call(operation, undefined)).status).toBe(401)
  })

  test('is refused to every role outside, also as a second customer, and never to those inside', async () => {
    const callers = [
      ...roles.map((role) => ({ role, accountId: personOf(role).accountId })),
      { role: 'customer' as const, accountId: people.secondCustomer.accountId },
    ]
    for (const { role, accountId } of callers) {
      const { status, text } = await call(operation, await freshCookie(accountId))
      const what = `${role}: ${status} ${text.slice(0, 200)}`
      if (allowedRoles(operation).includes(role)) {
        expect([200, 201, 202, 204, 404, 409, 422], what).toContain(status)
      } else {
        expect(status, what).toBe(403)
      }
    }
  })

  test('from another origin is refused when it writes', async () => {
    if (operation.method === 'GET') return
    const role = allowedRoles(operation)[0] ?? 'administrator'
    const cookie = await freshCookie(personOf(role).accountId)
    expect((await call(operation, cookie, { origin: 'https://elsewhere.example' })).status).toBe(403)
  })
})

describe.each(open)('%s', (_name, operation) => {
  test('is open to all and knows no session it was not given', async () => {
    const { status, text } = await call(operation, undefined)
    expect([200, 204, 404, 422, 503], text.slice(0, 200)).toContain(status)
  })
})

describe.each(ofGateways)('%s', (_name, operation) => {
  test('takes a device token, and neither a session nor nothing', async () => {
    expect((await call(operation, undefined)).status).toBe(401)
    const cookie = await freshCookie(people.administrator.accountId)
    expect((await call(operation, cookie)).status).toBe(401)
    expect((await call(operation, undefined, { authorization: 'Bearer nothing' })).status).toBe(401)
  })
})

describe.each(ofDevices)('%s', (_name, operation) => {
  test('takes an enrolled device’s cookie, and neither a session nor nothing nor a revoked one', async () => {
    expect((await call(operation, undefined)).status).toBe(401)
    const cookie = await freshCookie(people.administrator.accountId)
    expect((await call(operation, cookie)).status).toBe(401)
    const { status, text } = await call(operation, device.cookie)
    expect([200, 204, 422], text.slice(0, 200)).toContain(status)
    const gone = await createTestDevice(people)
    await queryRows(
      await forkEm(),
      'update devices set revoked_at = now(), revoked_by = created_by where id = ?',
      [gone.id],
    )
    expect((await call(operation, gone.cookie)).status).toBe(401)
  })

  test('from another origin is refused when it writes', async () => {
    if (operation.method === 'GET') return
    expect((await call(operation, device.cookie, { origin: 'https://elsewhere.example' })).status).toBe(403)
  })
})

describe.each(guarded)('at an enrolled device, %s', (_name, operation) => {
  test('opens to a PIN only where that is said, and to no role besides', async () => {
    for (const role of ['toaster', 'master cooper', 'chemist'] as const) {
      const { cookie } = await createTestPinSession(device, personOf(role).accountId)
      const { status, text } = await call(operation, cookie)
      const what = `${role}: ${status} ${text.slice(0, 200)}`
      if (operation.atDevice === undefined || !allowedRoles(operation).includes(role)) {
        expect(status, what).toBe(403)
      } else {
        expect([200, 201, 202, 204, 404, 409, 422], what).toContain(status)
      }
    }
  })

  test('a PIN’s session without the device’s cookie, or beside another’s, is no session', async () => {
    const { sessionCookie } = await createTestPinSession(device, people.toaster.accountId)
    const other = await createTestDevice(people)
    expect((await call(operation, sessionCookie)).status).toBe(401)
    expect((await call(operation, `${other.cookie}; ${sessionCookie}`)).status).toBe(
      operation.atDevice === 'alone' ? (await call(operation, other.cookie)).status : 401,
    )
  })

  test('with nobody signed in it reads what stands in the room, and nothing else', async () => {
    const { status, text } = await call(operation, device.cookie)
    if (operation.atDevice === 'alone') {
      expect(operation.method).toBe('GET')
      expect([200, 404], text.slice(0, 200)).toContain(status)
    } else {
      expect(status, text.slice(0, 200)).toBe(401)
    }
  })
})

describe('the list of operations', () => {
  const methods: readonly Method[] = ['GET', 'POST', 'PUT', 'DELETE']

  test('has every handler of every route file, and no handler is missing', async () => {
    const served: string[] = []
    for (const { file, segments } of listRouteFiles()) {
      const module: unknown = await import(file)
      const path = `/${segments.join('/').replaceAll(/\[(?:\.\.\.)?(\w+)\]/g, '{$1}')}`
      for (const method of [...methods, 'PATCH', 'HEAD', 'OPTIONS']) {
        if (Reflect.has(Object(module), method)) served.push(`${method} ${path}`)
      }
    }
    expect(served.sort()).toEqual(rows.map(([name]) => name).sort())
  })

  test('names each operation once', () => {
    const ids = allOperations.map((operation) => operation.id)
    expect(new Set(ids).size).toBe(ids.length)
  })

  test('becomes an OpenAPI 3.1 document whose references all lead somewhere', async () => {
    const { json, status } = await callRoute('GET', '/api/openapi.json')
    expect(status).toBe(200)
    expect(json).toMatchObject({ openapi: '3.1.0' })
    const text = JSON.stringify(json)
    for (const [, pointer = ''] of text.matchAll(/"\$ref":"#\/([^"]+)"/g)) {
      const target = pointer.split('/').reduce<unknown>((at, key) => Reflect.get(Object(at), key), json)
      expect(target, pointer).toBeDefined()
    }
    for (const operation of allOperations) {
      const described = Reflect.get(
        Object(Reflect.get(Object(Reflect.get(Object(json), 'paths')), operation.path)),
        operation.method.toLowerCase(),
      )
      const named = [...operation.path.matchAll(/\{(\w+)\}/g)].map((match) => match[1])
      const parameters: { name: string; in: string }[] = Reflect.get(Object(described), 'parameters') ?? []
      const inPath = parameters.filter((parameter) => parameter.in === 'path').map(({ name }) => name)
      expect(inPath.sort(), operation.id).toEqual(named.sort())
    }
  })
})
