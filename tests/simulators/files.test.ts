import { mkdtempSync, rmSync } from 'node:fs'
import type { Server } from 'node:http'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import {
  DeleteObjectCommand,
  GetObjectCommand,
  HeadObjectCommand,
  PutObjectCommand,
  S3Client,
} from '@aws-sdk/client-s3'
import { getSignedUrl } from '@aws-sdk/s3-request-presigner'
import fc from 'fast-check'
import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { openObjectFolder } from '@/simulators/files/object-folder'
import { startFilesServer } from '@/simulators/files/server'

const keys = { accessKeyId: 'tester', secretAccessKey: 'a secret of this test', region: 'us-east-1' }

let folder = ''
let server: Server
let url = ''
let clockMs: number | null = null

beforeEach(async () => {
  folder = mkdtempSync(join(tmpdir(), 'emberstave-files-'))
  clockMs = null
  server = await startFilesServer({
    port: 0,
    bucket: 'photos',
    keys,
    folder: openObjectFolder(folder),
    nowMs: () => clockMs ?? Date.now(),
  })
  const address = server.address()
  if (address === null || typeof address === 'string') throw new Error('no port')
  url = `http://127.0.0.1:${address.port}`
})

afterEach(() => {
  server.closeAllConnections()
  server.close()
  rmSync(folder, { recursive: true })
})

function client(changed: Partial<typeof keys> = {}): S3Client {
  const { region, ...credentials } = { ...keys, ...changed }
  return new S3Client({
    endpoint: url,
    region,
    credentials,
    forcePathStyle: true,
    maxAttempts: 1,
    requestChecksumCalculation: 'WHEN_REQUIRED',
    responseChecksumValidation: 'WHEN_REQUIRED',
  })
}

const put = (key: string, body: Buffer, by = client()) =>
  by.send(new PutObjectCommand({ Bucket: 'photos', Key: key, Body: body, ContentType: 'image/jpeg' }))

async function get(key: string): Promise<Buffer> {
  const answer = await client().send(new GetObjectCommand({ Bucket: 'photos', Key: key }))
  return Buffer.from((await answer.Body?.transformToByteArray()) ?? [])
}

function signed(key: string, expiresIn: number): Promise<string> {
  return getSignedUrl(client(), new GetObjectCommand({ Bucket: 'photos', Key: key }), { expiresIn })
}

describe('the files simulator, by the SDK itself', () => {
  it('law: what was put under any key comes back byte for byte, and is gone once removed', async () => {
    const key = fc.string({ minLength: 1, maxLength: 60, unit: 'grapheme-ascii' }).filter((text) => {
      return !/(^|\/)\.{0,2}(\/|$)/.test(text)
    })
    await fc.assert(
      fc.asyncProperty(key, fc.uint8Array({ maxLength: 2_000 }), async (name, bytes) => {
        await put(name, Buffer.from(bytes))
        expect(await get(name)).toEqual(Buffer.from(bytes))
        await client().send(new DeleteObjectCommand({ Bucket: 'photos', Key: name }))
        await expect(get(name)).rejects.toMatchObject({ name: 'NoSuchKey' })
      }),
      { seed: 20270201, numRuns: 40 },
    )
  })

  it('is told the size and type of an object by HEAD', async () => {
    await put('a/b.jpg', Buffer.from('12345'))
    const head = await client().send(new HeadObjectCommand({ Bucket: 'photos', Key: 'a/b.jpg' }))
    expect(head).toMatchObject({ ContentLength: 5, ContentType: 'image/jpeg' })
  })

  it('still has an object after a restart', async () => {
    await put('kept.jpg', Buffer.from('kept'))
    expect((await openObjectFolder(folder).get('kept.jpg'))?.bytes.toString()).toBe('kept')
  })

  it('lets nobody in unsigned', async () => {
    await put('a.jpg', Buffer.from('1'))
    for (const method of ['GET', 'PUT', 'DELETE', 'HEAD']) {
      const answer = await fetch(`${url}/photos/a.jpg`, {
        method,
        ...(method === 'PUT' ? { body: 'x' } : {}),
      })
      expect(answer.status, method).toBe(403)
    }
    expect((await get('a.jpg')).toString()).toBe('1')
  })

  it('refuses another secret, another key, another region and another bucket', async () => {
    const body = Buffer.from('1')
    await expect(put('a', body, client({ secretAccessKey: 'another secret' }))).rejects.toMatchObject({
      name: 'SignatureDoesNotMatch',
    })
    await expect(put('a', body, client({ accessKeyId: 'another' }))).rejects.toMatchObject({
      name: 'InvalidAccessKeyId',
    })
    await expect(put('a', body, client({ region: 'eu-west-1' }))).rejects.toMatchObject({
      name: 'AuthorizationHeaderMalformed',
    })
    const elsewhere = client().send(new PutObjectCommand({ Bucket: 'others', Key: 'a', Body: body }))
    await expect(elsewhere).rejects.toMatchObject({ name: 'NoSuchBucket' })
  })

  it('refuses a signature of another quarter of an hour', async () => {
    clockMs = Date.now() + 16 * 60_000
    await expect(put('a', Buffer.from('1'))).rejects.toMatchObject({ name: 'RequestTimeTooSkewed' })
  })

  it('refuses a body that is not the one that was signed', async () => {
    const own = client()
    own.middlewareStack.add(
      (next) => (args) => {
        if (typeof args.request === 'object' && args.request !== null)
          Reflect.set(args.request, 'body', Buffer.from('changed!'))
        return next(args)
      },
      { step: 'finalizeRequest', priority: 'low', name: 'changer' },
    )
    await expect(put('a', Buffer.from('as I was'), own)).rejects.toMatchObject({
      name: 'XAmzContentSHA256Mismatch',
    })
  })
})

describe('an address that was signed beforehand', () => {
  it('opens its one object, until it expires and not after', async () => {
    await put('face.jpg', Buffer.from('face'))
    const address = await signed('face.jpg', 60)
    expect(await (await fetch(address)).text()).toBe('face')
    clockMs = Date.now() + 59_000
    expect((await fetch(address)).status).toBe(200)
    clockMs = Date.now() + 62_000
    const late = await fetch(address)
    expect(late.status).toBe(403)
    expect(await late.text()).toContain('Request has expired')
  })

  it('opens no other object, no other verb, and not for longer than it says', async () => {
    await put('face.jpg', Buffer.from('face'))
    await put('other.jpg', Buffer.from('other'))
    const address = await signed('face.jpg', 60)
    const changed = [
      address.replace('face.jpg', 'other.jpg'),
      address.replace('X-Amz-Expires=60', 'X-Amz-Expires=6000'),
      address.replace(/X-Amz-Signature=[0-9a-f]{4}/, 'X-Amz-Signature=0000'),
      `${address}&response-content-type=text%2Fhtml`,
    ]
    for (const one of changed) expect((await fetch(one)).status, one).toBe(403)
    expect((await fetch(address, { method: 'DELETE' })).status).toBe(403)
    expect((await fetch(address.replace('X-Amz-Expires=60', 'X-Amz-Expires=0'))).status).toBe(400)
  })
})
