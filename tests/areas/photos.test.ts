import { randomUUID } from 'node:crypto'
import { mkdtempSync, readdirSync, rmSync } from 'node:fs'
import type { Server } from 'node:http'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, test } from 'vitest'
import { closeOrm, forkEm, queryRows } from '@/lib/db/orm'
import { signedAddress } from '@/lib/files/file-store'
import { addPhoto } from '@/lib/firings/add-photo'
import { describePhoto } from '@/lib/firings/describe-photo'
import { eraseRemovedPhotos } from '@/lib/firings/erase-photos'
import { finishFiring } from '@/lib/firings/finish-firing'
import { listPhotos } from '@/lib/firings/list-photos'
import type { PhotoDto } from '@/lib/firings/photo-schema'
import { photosAtMost } from '@/lib/firings/photo-kinds'
import { removePhoto } from '@/lib/firings/remove-photo'
import { startOwnFiles } from '@/simulators/scenarios/own-files'
import { callRoute } from '@/tests/support/api'
import type { TestDatabase } from '@/tests/support/database'
import { createTestDatabase } from '@/tests/support/database'
import { refusalOf } from '@/tests/support/firing-room'
import type { TestPeople, TestPerson } from '@/tests/support/people'
import { createPeople, createPerson } from '@/tests/support/people'
import { decompressionBomb, picture, telephonePicture } from '@/tests/support/pictures'
import type { TestFiring } from '@/tests/support/room'
import { createTestFiring, createTestGateway, createTestProbe } from '@/tests/support/room'

let database: TestDatabase
let people: TestPeople
let otherToaster: TestPerson
let files: Server
let folder = ''
let firing: TestFiring

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'emberstave-photos-'))
  files = await startOwnFiles(folder)
  database = await createTestDatabase()
  people = await createPeople(database)
  otherToaster = await createPerson({ role: 'toaster', name: 'Nell Birch' })
  firing = await newFiring()
})

afterAll(async () => {
  await closeOrm()
  await database.drop()
  files.closeAllConnections()
  files.close()
  rmSync(folder, { recursive: true })
})

let channel = 0
async function newFiring(): Promise<TestFiring> {
  const gateway = await createTestGateway()
  const lead = await createTestProbe(gateway.gatewayId, (channel += 1))
  return createTestFiring({
    accountId: people.toaster.accountId,
    customerId: people.customers.first.id,
    state: 'toasting',
    preheatAt: new Date(Date.now() - 3_600_000),
    toastAt: new Date(Date.now() - 2_400_000),
    probes: { lead: lead.id },
  })
}

const add = (bytes: Buffer, more: Partial<Parameters<typeof addPhoto>[1]> = {}) =>
  addPhoto(people.toaster.actor, {
    firingId: firing.id,
    id: randomUUID(),
    kind: 'face',
    caption: '',
    bytes,
    ...more,
  })

async function open(photo: PhotoDto, size: 'large' | 'thumbnail' = 'large', cookie = people.toaster.cookie) {
  return callRoute('GET', `/api/photos/${photo.id}/${size}`, { cookie })
}

/** The bytes of what the storage keeps, past the route: `text` of an answer is no place for a picture. */
async function stored(photo: PhotoDto, column: 'file_key' | 'thumbnail_key' = 'file_key'): Promise<Buffer> {
  const [row] = await queryRows<{ key: string }>(
    await forkEm(),
    `select ${column} as key from firing_photos where id = ?`,
    [photo.id],
  )
  const answer = await fetch(await signedAddress(row?.key ?? ''))
  return Buffer.from(await answer.arrayBuffer())
}

const objectCount = () => readdirSync(join(folder, 'files')).filter((name) => name.endsWith('.json')).length

describe('a photo of a firing', () => {
  test('is kept small, upright and without place, camera or date', async () => {
    const original = await telephonePicture()
    const before = await sharp(original).metadata()
    expect(before.orientation).toBe(6)
    expect(original.includes('Telephone')).toBe(true)
    expect(before.exif?.length).toBeGreaterThan(100)

    const photo = await add(original, { caption: 'Bilge, after the rest' })
    expect(photo).toMatchObject({ kind: 'face', caption: 'Bilge, after the rest', by: 'Tobin Ash' })
    // 640 × 480 on its side stands 480 × 640.
    expect(photo).toMatchObject({ widthPx: 480, heightPx: 640 })
    for (const column of ['file_key', 'thumbnail_key'] as const) {
      const bytes = await stored(photo, column)
      const after = await sharp(bytes).metadata()
      expect(after.format).toBe('jpeg')
      for (const tag of ['orientation', 'exif', 'iptc', 'xmp'] as const) expect(after[tag]).toBeUndefined()
      expect(bytes.includes('Telephone')).toBe(false)
      expect(bytes.includes('Exif')).toBe(false)
    }
    // Turned a quarter to the right, what was dark on the left is dark above.
    const { data, info } = await sharp(await stored(photo))
      .raw()
      .toBuffer({ resolveWithObject: true })
    const at = (x: number, y: number) => data[(y * info.width + x) * info.channels] ?? 0
    expect(at(240, 20)).toBeLessThan(90)
    expect(at(240, 620)).toBeGreaterThan(190)
  })

  test('fits into 2048 px, its small form into 400, and is never made larger', async () => {
    const wide = await add(await picture('jpeg', { width: 3_000, height: 1_000 }))
    expect(wide).toMatchObject({ widthPx: 2_048, heightPx: 683 })
    expect(await sharp(await stored(wide, 'thumbnail_key')).metadata()).toMatchObject({ width: 400 })
    const small = await add(await picture('webp', { width: 90, height: 60 }))
    expect(small).toMatchObject({ widthPx: 90, heightPx: 60 })
  })

  test('is told by its content: a PNG and a WebP serve, whatever they are called', async () => {
    for (const format of ['png', 'webp'] as const) {
      const photo = await add(await picture(format))
      expect(await sharp(await stored(photo)).metadata()).toMatchObject({ format: 'jpeg' })
    }
  })
})

describe('what is no photo is refused in words, and nothing of it is kept', () => {
  const svg = `<svg xmlns="http://www.w3.org/2000/svg"><script>alert(1)</script></svg>`
  const hostile: [what: string, bytes: () => Buffer | Promise<Buffer>, sentence: string][] = [
    ['nothing', () => Buffer.alloc(0), 'Choose a picture.'],
    ['an SVG with a script', () => Buffer.from(svg), 'no JPEG, PNG or WebP'],
    ['an SVG with a declaration', () => Buffer.from(`<?xml version="1.0"?>${svg}`), 'no JPEG, PNG or WebP'],
    [
      'a page that calls itself face.jpg',
      () => Buffer.from('<!doctype html><script>1</script>'),
      'no JPEG, PNG or WebP',
    ],
    ['a GIF', () => picture('gif'), 'no JPEG, PNG or WebP'],
    ['a TIFF', () => picture('tiff'), 'no JPEG, PNG or WebP'],
    ['a program', () => Buffer.from('\x7fELF\x02\x01\x01 and more of it', 'latin1'), 'no JPEG, PNG or WebP'],
    [
      'a HEIC picture',
      () => Buffer.concat([Buffer.from([0, 0, 0, 24]), Buffer.from('ftypheic\0\0\0\0heicmif1')]),
      'HEIC picture',
    ],
    ['144 million pixels in 18 KB', decompressionBomb, '50 million pixels'],
    [
      'a JPEG that is cut off',
      async () => (await picture('jpeg', { width: 900, height: 900 })).subarray(0, 900),
      'damaged',
    ],
    [
      'a page behind a JPEG’s first bytes',
      () => Buffer.concat([Buffer.from([0xff, 0xd8, 0xff, 0xe0]), Buffer.from('<script>1</script>')]),
      'damaged',
    ],
  ]

  test.each(hostile)('%s', async (_what, bytes, sentence) => {
    const [before, content] = [objectCount(), await bytes()]
    const refusal = await refusalOf(add(content))
    expect(refusal).toMatchObject({ kind: 'invalid', fields: { photo: expect.stringContaining(sentence) } })
    expect(objectCount()).toBe(before)
  })

  test('a page that hides behind a whole picture is not there any more once the picture is kept', async () => {
    const photo = await add(Buffer.concat([await picture('jpeg'), Buffer.from('<script>alert(1)</script>')]))
    expect((await stored(photo)).includes('<script>')).toBe(false)
  })

  test('more than 15 MB is refused before it is read, and says so', async () => {
    const answer = await callRoute('POST', `/api/firings/${firing.id}/photos?id=${randomUUID()}&kind=face`, {
      cookie: people.toaster.cookie,
      body: new Uint8Array(15 * 1024 * 1024 + 1),
      headers: { 'content-type': 'image/jpeg' },
    })
    expect(answer.status).toBe(413)
    expect(answer.json).toMatchObject({ fields: { photo: 'This picture is over 15 MB. Take it smaller.' } })
  })
})

describe('by its routes', () => {
  test('is sent as the body, and comes back as a download that no page can run', async () => {
    const answer = await callRoute(
      'POST',
      `/api/firings/${firing.id}/photos?id=${randomUUID()}&kind=blister&caption=Stave%2012`,
      {
        cookie: people.toaster.cookie,
        body: new Uint8Array(await picture('jpeg')),
        headers: { 'content-type': 'image/jpeg' },
      },
    )
    expect(answer.status).toBe(201)
    const [photo] = (await listPhotos(people.toaster.actor, { id: firing.id })).items.slice(-1)
    expect(photo).toMatchObject({ kind: 'blister', caption: 'Stave 12' })
    if (photo === undefined) throw new Error('no photo')
    const opened = await open(photo, 'thumbnail')
    expect(opened.status).toBe(200)
    expect(opened.headers.get('content-type')).toBe('image/jpeg')
    expect(opened.headers.get('content-disposition')).toMatch(
      /^attachment; filename="TST-\d{4}-A-blister\.jpg"$/,
    )
    expect(opened.headers.get('cache-control')).toContain('private')
    expect(opened.headers.get('x-content-type-options')).toBe('nosniff')
  })

  test('opens to nobody without a session, to no customer, and to no other toaster once the firing is over', async () => {
    const own = await newFiring()
    const photo = await add(await picture('jpeg'), { firingId: own.id })
    expect((await callRoute('GET', `/api/photos/${photo.id}/large`)).status).toBe(401)
    expect((await open(photo, 'large', people.customer.cookie)).status).toBe(403)
    expect((await open(photo, 'large', otherToaster.cookie)).status).toBe(200)
    await finishFiring(people.toaster.actor, {
      id: own.id,
      colour: null,
      smell: null,
      outsideTempC: null,
      remarks: '',
    })
    expect((await open(photo, 'large', otherToaster.cookie)).status).toBe(404)
    expect((await open(photo, 'large', people.chemist.cookie)).status).toBe(200)
    expect((await open(photo, 'large', people.administrator.cookie)).status).toBe(200)
  })

  test('an address of the storage itself is not to be had without its signature', async () => {
    const photo = await add(await picture('jpeg'), { firingId: (await newFiring()).id })
    const [row] = await queryRows<{ file_key: string }>(
      await forkEm(),
      'select file_key from firing_photos where id = ?',
      [photo.id],
    )
    const address = new URL(await signedAddress(row?.file_key ?? ''))
    expect((await fetch(address)).status).toBe(200)
    address.search = ''
    expect((await fetch(address)).status).toBe(403)
  })
})

describe('what becomes of a photo', () => {
  test('the same id again adds nothing; another firing’s id is refused', async () => {
    const own = await newFiring()
    const input = { firingId: own.id, id: randomUUID() }
    const first = await add(await picture('jpeg'), input)
    expect(await add(await picture('png'), input)).toEqual(first)
    expect((await listPhotos(people.toaster.actor, { id: own.id })).items).toHaveLength(1)
    const refusal = await refusalOf(add(await picture('png'), { id: input.id }))
    expect(refusal.kind).toBe('conflict')
  })

  test('a firing keeps twelve, also when they come at once', async () => {
    const own = await newFiring()
    const bytes = await picture('jpeg', { width: 20, height: 20 })
    const tries = Array.from({ length: photosAtMost + 3 }, () =>
      add(bytes, { firingId: own.id }).then(
        () => 'added',
        (error: unknown) => String(error),
      ),
    )
    const outcomes = await Promise.all(tries)
    expect(outcomes.filter((outcome) => outcome === 'added')).toHaveLength(photosAtMost)
    expect(outcomes.filter((outcome) => /has its 12 photos/.test(outcome))).toHaveLength(3)
  })

  test('its caption is put right and the change kept', async () => {
    const photo = await add(await picture('jpeg'), { firingId: (await newFiring()).id, caption: 'Bilgee' })
    const changed = await describePhoto(people.masterCooper.actor, {
      id: photo.id,
      kind: 'other',
      caption: 'Bilge',
    })
    expect(changed).toMatchObject({ kind: 'other', caption: 'Bilge' })
    const trail = await callRoute('GET', '/api/audit-entries?action=photo.described', {
      cookie: people.masterCooper.cookie,
    })
    expect(trail.json).toMatchObject({
      items: [{ detail: { changes: { caption: { from: 'Bilgee', to: 'Bilge' } } } }],
    })
  })

  test('removed with a reason its row stays, its picture is erased and opens to nobody', async () => {
    const own = await newFiring()
    const photo = await add(await picture('jpeg'), { firingId: own.id })
    const before = objectCount()
    await removePhoto(people.toaster.actor, { id: photo.id, reason: 'A face is to be seen' })
    expect(objectCount()).toBe(before - 2)
    expect((await open(photo)).status).toBe(404)
    const [kept] = (await listPhotos(people.toaster.actor, { id: own.id })).items
    expect(kept?.removed).toMatchObject({ by: 'Tobin Ash', reason: 'A face is to be seen' })
    expect(
      await refusalOf(removePhoto(people.toaster.actor, { id: photo.id, reason: 'again' })),
    ).toMatchObject({
      kind: 'not found',
    })
  })

  test('where the storage does not answer it is refused and none kept; a removal is made good later', async () => {
    const own = await newFiring()
    const photo = await add(await picture('jpeg'), { firingId: own.id })
    const address = files.address()
    if (address === null || typeof address === 'string') throw new Error('no port')
    files.closeAllConnections()
    await new Promise((resolve) => files.close(resolve))

    expect(await refusalOf(add(await picture('jpeg'), { firingId: own.id }))).toMatchObject({
      kind: 'unavailable',
    })
    await removePhoto(people.toaster.actor, { id: photo.id, reason: 'Taken by mistake' })
    expect((await open(photo)).status).toBe(404)

    await new Promise<void>((resolve) => files.listen(address.port, '127.0.0.1', resolve))
    expect(await eraseRemovedPhotos()).toBe(1)
    expect(await eraseRemovedPhotos()).toBe(0)
  })
})

describe('the database', () => {
  test('holds that a photo is never exchanged, deleted or brought back', async () => {
    const own = await newFiring()
    const photo = await add(await picture('jpeg'), { firingId: own.id })
    const em = await forkEm()
    const tries = [
      ['delete from firing_photos where id = ?', 'permission denied'],
      [`update firing_photos set sha256 = repeat('0', 64) where id = ?`, 'never exchanged'],
      [`update firing_photos set file_key = repeat('k', 40) where id = ?`, 'never exchanged'],
      ['update firing_photos set removed_at = now() where id = ?', 'firing_photos_removed_whole'],
    ] as const
    for (const [sql, words] of tries) {
      await expect(queryRows(em, sql, [photo.id])).rejects.toThrow(words)
    }
    await removePhoto(people.toaster.actor, { id: photo.id, reason: 'Taken by mistake' })
    await expect(
      queryRows(
        em,
        'update firing_photos set removed_at = null, removed_by = null, removed_reason = null where id = ?',
        [photo.id],
      ),
    ).rejects.toThrow('was removed')
  })
})
