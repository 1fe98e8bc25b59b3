import { randomBytes, randomUUID } from 'node:crypto'
import { mkdtempSync, readdirSync, readFileSync, rmSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { deflateSync, crc32 } from 'node:zlib'
import sharp from 'sharp'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { workLimits } from '#shared/contracts/limits.ts'
import { photoSchema } from '#shared/contracts/work.ts'
import type { Photo } from '#shared/contracts/work.ts'
import { photos } from '../../../server/db/schema/index.ts'
import { makeBackup } from '../../../server/services/backup.ts'
import { makeCompany, makePerson } from '../../support/people.ts'
import type { TestPerson } from '../../support/people.ts'
import { readProblem } from '../../support/requests.ts'
import { startServer } from '../../support/server.ts'
import type { RunningServer } from '../../support/server.ts'
import { makeBoreCheckBody, makeYard, save } from '../../support/work.ts'

let server: RunningServer
let owner: TestPerson
let blaster: TestPerson
let stranger: TestPerson

beforeAll(async () => {
  server = await startServer()
  owner = makePerson(server, makeCompany(server), ['owner'])
  blaster = makePerson(server, owner.company, ['blaster'], { name: 'Bo Blaster' })
  stranger = makePerson(server, makeCompany(server))
})
afterAll(() => server.stop())

type Content = Buffer | Blob | FormData

function send(
  person: TestPerson,
  content: Content,
  { id, type = 'image/jpeg', query }: { id?: string; type?: string | null; query?: string } = {},
): Promise<Response> {
  return fetch(`${server.address}/api/v1/photos?${query ?? `id=${id ?? randomUUID()}`}`, {
    method: 'POST',
    headers: { cookie: person.cookie, ...(type !== null && { 'content-type': type }) },
    body: Buffer.isBuffer(content) ? new Uint8Array(content) : content,
  })
}

async function keep(content: Content, options: Parameters<typeof send>[2] = {}): Promise<Photo> {
  const response = await send(blaster, content, options)
  expect(response.status, await response.clone().text()).toBe(201)
  return photoSchema.parse(await response.json())
}

async function fetchPhoto(id: string, person = owner): Promise<Buffer> {
  const response = await person.ask('GET', `/api/v1/photos/${id}`)
  expect(response.status).toBe(200)
  return Buffer.from(await response.arrayBuffer())
}

const plain = (width: number, height: number) =>
  sharp({ create: { width, height, channels: 3, background: { r: 180, g: 60, b: 40 } } })

/** Left half red, right half blue. */
function makeHalves(width: number, height: number) {
  const half = { width: Math.floor(width / 2), height, channels: 3 as const }
  return plain(width, height).composite([
    { input: { create: { ...half, background: '#ff0000' } }, left: 0, top: 0 },
    { input: { create: { ...half, background: '#0000ff' } }, left: Math.floor(width / 2), top: 0 },
  ])
}

async function colourAt(picture: Buffer, left: number, top: number): Promise<number[]> {
  const { data } = await sharp(picture)
    .extract({ left, top, width: 1, height: 1 })
    .raw()
    .toBuffer({ resolveWithObject: true })
  return [...data]
}

/** What a phone writes into a picture: where, when and with what it was taken. */
function makePhonePhoto(): Promise<Buffer> {
  return makeHalves(400, 200)
    .withExif({
      IFD0: { Make: 'Brand X', Model: 'Phone of Pat', Software: 'camera 1.2', Copyright: 'Pat' },
      IFD2: { DateTimeOriginal: '2026:05:03 07:10:00' },
      IFD3: {
        GPSLatitudeRef: 'N',
        GPSLatitude: '39/1 44/1 21/1',
        GPSLongitudeRef: 'W',
        GPSLongitude: '104/1 59/1 5/1',
      },
    })
    .withXmp('<x:xmpmeta xmlns:x="adobe:ns:meta/"><note>secret place</note></x:xmpmeta>')
    .jpeg()
    .toBuffer()
}

const uploadsOf = (person: TestPerson) => join(server.context.config.dataDir, 'uploads', person.company.id)

/** A PNG of one colour with this size in its head, made by hand: it packs to nearly nothing (RFC 2083). */
function makeHugePng(width: number, height: number): Buffer {
  const chunk = (type: string, data: Buffer) => {
    const body = Buffer.concat([Buffer.from(type, 'latin1'), data])
    const length = Buffer.alloc(4)
    const check = Buffer.alloc(4)
    length.writeUInt32BE(data.length)
    check.writeUInt32BE(crc32(body))
    return Buffer.concat([length, body, check])
  }
  const head = Buffer.alloc(13)
  head.writeUInt32BE(width, 0)
  head.writeUInt32BE(height, 4)
  head[8] = 1
  const rows = Buffer.alloc(height * (1 + Math.ceil(width / 8)))
  return Buffer.concat([
    Buffer.from('\x89PNG\r\n\x1a\n', 'latin1'),
    chunk('IHDR', head),
    chunk('IDAT', deflateSync(rows)),
    chunk('IEND', Buffer.alloc(0)),
  ])
}

describe('a photo', () => {
  it('comes back as a picture, and belongs to a bore check', async () => {
    const photo = await keep(await makeHalves(640, 480).jpeg().toBuffer())
    expect(photo).toMatchObject({ widthPx: 640, heightPx: 480, by: 'Bo Blaster' })
    const response = await blaster.ask('GET', `/api/v1/photos/${photo.id}`)
    expect(response.headers.get('content-type')).toBe('image/jpeg')
    expect(response.headers.get('x-content-type-options')).toBe('nosniff')
    expect(response.headers.get('cache-control')).toBe('private, no-cache')
    const picture = Buffer.from(await response.arrayBuffer())
    expect(picture.length).toBe(photo.bytes)
    const [red, , blue] = await colourAt(picture, 10, 100)
    expect(red).toBeGreaterThan(230)
    expect(blue).toBeLessThan(30)
    const { nozzleId } = await makeYard(owner)
    const check = makeBoreCheckBody({ nozzleId, photoId: photo.id })
    expect(await save(blaster, 'bore-checks', check)).toMatchObject({ photoId: photo.id })
    const unknown = { id: randomUUID(), shape: 'straight', boxRigId: null, photoId: photo.id }
    expect(await save(blaster, 'nozzles/unknown', unknown)).toMatchObject({ photoId: photo.id })
  })

  it('is sent only once to a browser that has it', async () => {
    const { id } = await keep(await plain(20, 20).jpeg().toBuffer())
    const path = `${server.address}/api/v1/photos/${id}`
    const first = await fetch(path, { headers: { cookie: owner.cookie } })
    const etag = first.headers.get('etag')!
    const again = await fetch(path, {
      headers: { cookie: owner.cookie, 'if-none-match': etag, 'cache-control': 'max-age=0' },
    })
    expect(again.status).toBe(304)
    const nobody = await fetch(path, { headers: { 'if-none-match': etag } })
    expect(nobody.status).toBe(401)
  })

  it('comes back without the place, the time and the camera', async () => {
    const sent = await makePhonePhoto()
    const before = await sharp(sent).metadata()
    expect(before.exif).toBeDefined()
    expect(before.xmp).toBeDefined()
    expect(sent.includes('Phone of Pat')).toBe(true)
    const { id } = await keep(sent)
    const back = await fetchPhoto(id)
    const { exif, xmp, iptc, icc } = await sharp(back).metadata()
    expect({ exif, xmp, iptc, icc }).toEqual({})
    for (const mark of ['Exif', 'Phone', 'Brand', 'secret', 'GPS', '2026:05']) {
      expect(back.includes(mark)).toBe(false)
    }
  })

  it('stands upright, however the phone was held', async () => {
    // EXIF orientation 6: the picture is to be turned a quarter clockwise, so that its left becomes the top.
    const sent = await makeHalves(400, 200).withMetadata({ orientation: 6 }).jpeg().toBuffer()
    const photo = await keep(sent)
    expect(photo).toMatchObject({ widthPx: 200, heightPx: 400 })
    const back = await fetchPhoto(photo.id)
    const [redOnTop] = await colourAt(back, 100, 20)
    const [redBelow] = await colourAt(back, 100, 380)
    expect(redOnTop).toBeGreaterThan(230)
    expect(redBelow).toBeLessThan(30)
  })

  it('is at most 2,000 px on its longer side, and a small one stays as small', async () => {
    const large = await keep(await plain(3000, 1500).jpeg().toBuffer())
    expect(large).toMatchObject({ widthPx: 2000, heightPx: 1000 })
    const small = await keep(await plain(40, 30).png().toBuffer(), { type: 'image/png' })
    expect(small).toMatchObject({ widthPx: 40, heightPx: 30 })
  })

  it('may be a PNG or a WebP, and a form; what shows through is white', async () => {
    const clear = sharp({ create: { width: 30, height: 30, channels: 4, background: '#00000000' } })
    const png = await keep(await clear.png().toBuffer(), { type: 'image/png' })
    for (const value of await colourAt(await fetchPhoto(png.id), 15, 15)) expect(value).toBeGreaterThan(250)
    const webp = await keep(await plain(30, 30).webp().toBuffer(), { type: 'image/webp' })
    expect((await sharp(await fetchPhoto(webp.id)).metadata()).format).toBe('jpeg')
    const form = new FormData()
    form.append('file', new Blob([new Uint8Array(await plain(31, 30).jpeg().toBuffer())]), '../../etc/passwd')
    expect(await keep(form, { type: null })).toMatchObject({ widthPx: 31 })
  })

  it('is kept under a name of its own beside the database, for the owner of the process alone', async () => {
    const { id } = await keep(await plain(50, 50).jpeg().toBuffer())
    const row = server.database.queries
      .select()
      .from(photos)
      .all()
      .find((one) => one.id === id)!
    expect(row.fileName).toMatch(/^[0-9a-f]{48}\.jpg$/)
    expect(row.fileName).not.toContain(id.slice(0, 8))
    const kept = join(uploadsOf(owner), row.fileName)
    expect(readFileSync(kept)).toEqual(await fetchPhoto(id))
    expect(statSync(kept).mode & 0o077).toBe(0)
    expect(statSync(uploadsOf(owner)).mode & 0o077).toBe(0)
    expect((await fetch(`${server.address}/uploads/${owner.company.id}/${row.fileName}`)).status).toBe(404)
  })

  it('is one photo when it comes eight times at once, and leaves no second file', async () => {
    const content = await plain(300, 300).jpeg().toBuffer()
    const id: string = randomUUID()
    const before = readdirSync(uploadsOf(owner)).length
    const answers = await Promise.all(Array.from({ length: 8 }, () => send(blaster, content, { id })))
    expect(answers.map(({ status }) => status)).toEqual(Array.from({ length: 8 }, () => 201))
    const texts = await Promise.all(answers.map((answer) => answer.text()))
    expect(new Set(texts).size).toBe(1)
    expect(readdirSync(uploadsOf(owner))).toHaveLength(before + 1)
    const other = await send(blaster, await plain(10, 10).jpeg().toBuffer(), { id })
    expect((await readProblem(other)).code).toBe('id-in-use')
  })

  it('is not there for another company', async () => {
    const { id } = await keep(await plain(50, 50).jpeg().toBuffer())
    expect((await readProblem(await stranger.ask('GET', `/api/v1/photos/${id}`))).status).toBe(404)
    const theirs = await send(stranger, await plain(60, 60).jpeg().toBuffer(), { id })
    expect(theirs.status).toBe(201)
    expect((await sharp(await fetchPhoto(id)).metadata()).width).toBe(50)
    expect((await sharp(await fetchPhoto(id, stranger)).metadata()).width).toBe(60)
  })

  it('is in the backup, byte for byte', async () => {
    const { id } = await keep(await plain(70, 70).jpeg().toBuffer())
    const backupDir = mkdtempSync(join(tmpdir(), 'sixteenth-test-'))
    try {
      const { config } = server.context
      const folder = await makeBackup({ ...config, backupDir }, 'manual', new Date())
      const row = server.database.queries
        .select()
        .from(photos)
        .all()
        .find((one) => one.id === id)!
      const copy = readFileSync(join(folder, 'uploads', owner.company.id, row.fileName))
      expect(copy).toEqual(await fetchPhoto(id))
    } finally {
      rmSync(backupDir, { recursive: true, force: true })
    }
  })
})

describe('what is no photo', () => {
  async function refuse(content: Content, options: Parameters<typeof send>[2], status: number, word: RegExp) {
    const before = readdirSync(uploadsOf(owner))
    const problem = await readProblem(await send(blaster, content, options))
    expect(problem.status).toBe(status)
    expect(problem.detail).toMatch(word)
    expect(problem.detail).toMatch(/^[A-Z].*\.$/)
    expect(readdirSync(uploadsOf(owner))).toEqual(before)
  }
  const svg = Buffer.from(
    '<svg xmlns="http://www.w3.org/2000/svg" width="9" height="9"><script>alert(1)</script></svg>',
  )

  it.each([
    ['a drawing called a JPEG', svg],
    ['a page called a JPEG', Buffer.from('<!doctype html><script>alert(1)</script>')],
    ['random bytes', randomBytes(4000)],
    ['a GIF', Buffer.from('R0lGODlhAQABAAAAACH5BAEKAAEALAAAAAABAAEAAAICTAEAOw==', 'base64')],
  ])('is refused kindly: %s', (_what, content) =>
    refuse(content, {}, 415, /^This is not a JPEG, PNG or WebP picture/),
  )

  it('is refused by its content type, before any of it is looked at', async () => {
    await refuse(svg, { type: 'image/svg+xml' }, 415, /must be a JPEG, PNG or WebP/)
    await refuse(await plain(9, 9).jpeg().toBuffer(), { type: 'application/json' }, 415, /must be a JPEG/)
  })

  it('is refused where it is damaged or cut short', async () => {
    const whole = await makeHalves(800, 800).jpeg().toBuffer()
    await refuse(whole.subarray(0, whole.length / 2), {}, 422, /damaged/)
    await refuse(Buffer.from('\xff\xd8\xff\xe0 and nothing of a picture', 'latin1'), {}, 422, /damaged/)
    await refuse(Buffer.alloc(0), {}, 400, /no photo/)
  })

  it('is refused over 10 MB, as it is or in a form', async () => {
    const jpeg = await plain(20, 20).jpeg().toBuffer()
    const padded = Buffer.concat([jpeg, Buffer.alloc(workLimits.photoBytes + 1 - jpeg.length)])
    await refuse(padded, {}, 413, /at most 10 MB/)
    const form = new FormData()
    form.append('file', new Blob([new Uint8Array(padded)]), 'photo.jpg')
    await refuse(form, { type: null }, 413, /at most 10 MB/)
    expect((await send(blaster, padded.subarray(0, workLimits.photoBytes))).status).toBe(201)
  })

  it('is refused over 40 megapixels, however small it packs', async () => {
    const bomb = makeHugePng(8000, 5001)
    expect(bomb.length).toBeLessThan(100_000)
    await refuse(bomb, { type: 'image/png' }, 422, /at most 40 megapixels/)
    await refuse(makeHugePng(60_000, 60_000).subarray(0, 4000), { type: 'image/png' }, 422, /megapixels/)
    expect(await keep(makeHugePng(8000, 5000), { type: 'image/png' })).toMatchObject({ widthPx: 2000 })
  }, 30_000)

  it('is refused in a form of anything else', async () => {
    const twoFiles = new FormData()
    for (const name of ['file', 'other']) twoFiles.append(name, new Blob(['x']), 'x.jpg')
    await refuse(twoFiles, { type: null }, 400, /one photo/)
    const noFile = new FormData()
    noFile.append('name', 'x')
    await refuse(noFile, { type: null }, 400, /photo/)
    await refuse(Buffer.from('no parts'), { type: 'multipart/form-data' }, 400, /form/)
  })

  it('is refused without an id', async () => {
    const response = await send(blaster, await plain(9, 9).jpeg().toBuffer(), { query: '' })
    expect((await readProblem(response)).status).toBe(422)
  })

  it('is refused once the company’s room is full, and another company has its own', async () => {
    const full = makePerson(server, makeCompany(server), ['blaster'])
    const filler = (id: string, bytes: number) =>
      server.database.queries
        .insert(photos)
        .values({
          companyId: full.company.id,
          id,
          fileName: `${id}.jpg`,
          contentHash: '',
          bytes,
          widthPx: 1,
          heightPx: 1,
          byId: full.accountId,
          by: full.name,
          receivedAt: new Date().toISOString(),
        })
        .run()
    const content = await plain(200, 200).jpeg().toBuffer()
    filler('nearly', workLimits.photoQuotaBytes - 100)
    const problem = await readProblem(await send(full, content))
    expect(problem).toMatchObject({ status: 409, code: 'too-many-records' })
    expect(problem.detail).toMatch(/500 MB/)
    expect((await send(stranger, content)).status).toBe(201)
  })
})

describe('photos that come all at once', () => {
  it('are made a few at a time while other requests are answered', async () => {
    const busy = makePerson(server, makeCompany(server), ['blaster'])
    const content = await sharp(randomBytes(3000 * 2000 * 3), {
      raw: { width: 3000, height: 2000, channels: 3 },
    })
      .jpeg({ quality: 60 })
      .toBuffer()
    const uploads = Promise.all(Array.from({ length: 6 }, () => send(busy, content)))
    let isDone = false
    void uploads.then(() => (isDone = true))
    let answered = 0
    while (!isDone) {
      const response = await fetch(`${server.address}/api/v1/health`)
      expect(response.status).toBe(200)
      if (!isDone) answered += 1
    }
    expect((await uploads).map(({ status }) => status)).toEqual([201, 201, 201, 201, 201, 201])
    expect(answered).toBeGreaterThan(3)
  }, 60_000)
})
