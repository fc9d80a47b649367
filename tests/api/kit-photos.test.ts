import { existsSync, readdirSync, readFileSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import { PHOTOS_PER_ITEM, type ItemPhoto } from '#shared/kit/photo-contract'
import { sweepPhotoFiles } from '#server/services/kit/photos'
import { makeItem, makeKind } from '#tests/support/makers/kit'
import { people, type Person } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

function shelf() {
  const app = testApp()
  const cast = people(app)
  return { app, ...cast, item: makeItem(app, cast.sam, makeKind(app, cast.sam).id) }
}

/** Noise, the hardest thing to make small. */
const noise = (width: number, height: number) =>
  sharp({
    create: {
      width,
      height,
      channels: 3,
      background: '#777',
      noise: { type: 'gaussian', mean: 128, sigma: 60 },
    },
  })

const post = (who: Person, itemId: string, bytes: Buffer, name = 'photo.jpg') =>
  who.agent.post(`/api/items/${itemId}/photos`).attach('photo', bytes, name)

const kept = (app: TestApp) => {
  const folder = join(app.deps.uploadsDir, 'kit')
  return existsSync(folder) ? readdirSync(folder) : []
}
const codeOf = (reply: { status: number; body: unknown }) => [
  reply.status,
  (reply.body as { code?: string }).code,
]

describe('a photo of an item', () => {
  it('is redrawn upright as WebP, without what the camera noted, and has a small one beside it', async () => {
    const { app, sam, ada, item } = shelf()
    const bytes = await noise(3000, 1500)
      .withExif({
        IFD0: { Copyright: 'sentinel-exif' },
        IFD3: { GPSLatitude: '51/1 30/1 0/1' },
      })
      .withMetadata({ orientation: 6 })
      .jpeg()
      .toBuffer()
    expect(bytes.includes('sentinel-exif')).toBe(true)
    const reply = await post(sam, item.id, bytes, '../../etc/passwd.php')
    expect(reply.status).toBe(201)
    const photo = reply.body as ItemPhoto
    expect(photo).toMatchObject({
      itemId: item.id,
      addedByName: 'Sam Tolliver',
      widthPx: 1024,
      heightPx: 2048,
    })
    expect(kept(app)).toHaveLength(2)
    for (const file of kept(app)) expect(file).toMatch(/^[\w-]{32}\.(full|thumb)\.webp$/)
    const full = await ada.agent.get(`/api/photos/${photo.id}`).buffer(true)
    expect(full.status).toBe(200)
    expect(full.type).toBe('image/webp')
    expect(full.get('x-content-type-options')).toBe('nosniff')
    expect(full.get('content-security-policy')).toContain('sandbox')
    expect(full.get('cache-control')).toContain('private')
    const meta = await sharp(full.body as Buffer).metadata()
    expect([meta.format, meta.width, meta.exif, meta.icc]).toEqual(['webp', 1024, undefined, undefined])
    const thumb = await ada.agent.get(`/api/photos/${photo.id}?size=thumb`).buffer(true)
    expect((thumb.body as Buffer).length).toBeLessThanOrEqual(20 * 1024)
    expect((await sharp(thumb.body as Buffer).metadata()).height).toBeLessThanOrEqual(320)
    const known = await ada.agent.get(`/api/photos/${photo.id}`).set('If-None-Match', full.get('etag') ?? '')
    expect(known.status).toBe(304)
  })

  it('is a steward’s to add and to remove; then nothing is left on disk', async () => {
    const { app, ada, sam, item } = shelf()
    const bytes = await noise(64, 64).png().toBuffer()
    expect(codeOf(await post(ada, item.id, bytes))).toEqual([403, 'forbidden'])
    const photo = (await post(sam, item.id, bytes)).body as ItemPhoto
    expect((await ada.agent.delete(`/api/photos/${photo.id}`)).status).toBe(403)
    expect((await sam.agent.delete(`/api/photos/${photo.id}`)).status).toBe(204)
    expect((await ada.agent.get(`/api/photos/${photo.id}`)).status).toBe(404)
    expect(kept(app)).toEqual([])
    const history = (await ada.agent.get(`/api/items/${item.id}/history`)).body as {
      items: { event: string }[]
    }
    expect(history.items.map((h) => h.event)).toEqual(['photo-removed', 'photo-added', 'added'])
  })

  it('is kept once when the same request comes twice', async () => {
    const { app, sam, item } = shelf()
    const bytes = await noise(64, 64).webp().toBuffer()
    const send = () => post(sam, item.id, bytes).set('Idempotency-Key', 'photo-1')
    const first = await send()
    const again = await send()
    expect(again.body).toEqual(first.body)
    expect(kept(app)).toHaveLength(2)
    const other = await post(sam, item.id, await noise(65, 64).webp().toBuffer()).set(
      'Idempotency-Key',
      'photo-1',
    )
    expect(codeOf(other)).toEqual([422, 'idempotency-key-reused'])
  })

  it('has a limited number of others beside it', async () => {
    const { sam, item } = shelf()
    const bytes = await noise(16, 16).png().toBuffer()
    for (let n = 0; n < PHOTOS_PER_ITEM; n++) expect((await post(sam, item.id, bytes)).status).toBe(201)
    expect(codeOf(await post(sam, item.id, bytes))).toEqual([409, 'over-limit'])
  })
})

describe('an upload that is no photo', () => {
  const svg = Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"><script>alert(1)</script></svg>')

  it('gets the status that says why, and leaves nothing behind', async () => {
    const { app, sam, item } = shelf()
    const jpeg = await noise(800, 600).jpeg().toBuffer()
    const png = await noise(400, 400).png().toBuffer()
    const bomb = await sharp({ create: { width: 7000, height: 6000, channels: 3, background: '#000' } })
      .png()
      .toBuffer()
    const claims = Buffer.from(png)
    claims.writeUInt32BE(60_000, 16)
    claims.writeUInt32BE(60_000, 20)
    const cases: [name: string, bytes: Buffer, file: string, status: number][] = [
      ['svg', svg, 'a.svg', 415],
      ['svg named png', svg, 'a.png', 415],
      ['gif', Buffer.from('GIF89a\x01\x00\x01\x00\x80\x00\x00\xff\xff\xff\x00\x00\x00!'), 'a.gif', 415],
      ['html', Buffer.from('<!doctype html><script>1</script>'), 'a.jpg', 415],
      ['pdf', Buffer.from('%PDF-1.7 something'), 'a.jpg', 415],
      ['tiff', await noise(8, 8).tiff().toBuffer(), 'a.jpg', 415],
      ['empty', Buffer.alloc(0), 'a.jpg', 415],
      ['cut jpeg', jpeg.subarray(0, jpeg.length / 2), 'a.jpg', 400],
      ['cut png', png.subarray(0, png.length / 2), 'a.png', 400],
      ['head only', jpeg.subarray(0, 20), 'a.jpg', 400],
      ['42 megapixels', bomb, 'a.png', 413],
      ['claims to be huge', claims, 'a.png', 413],
      ['over 8 MiB', Buffer.concat([jpeg, Buffer.alloc(8 * 1024 * 1024)]), 'a.jpg', 413],
    ]
    for (const [name, bytes, file, status] of cases) {
      const reply = await post(sam, item.id, bytes, file)
      expect(reply.status, name).toBe(status)
      expect(reply.type).toBe('application/problem+json')
    }
    expect(kept(app)).toEqual([])
  })

  it('with a page hidden behind the picture is kept as the picture alone', async () => {
    const { app, sam, item } = shelf()
    const jpeg = await noise(64, 64).jpeg().toBuffer()
    const reply = await post(sam, item.id, Buffer.concat([jpeg, svg, Buffer.from('PK\x03\x04 sentinel-zip')]))
    expect(reply.status).toBe(201)
    for (const file of kept(app)) {
      const stored = readFileSync(join(app.deps.uploadsDir, 'kit', file))
      expect(stored.includes('script') || stored.includes('sentinel')).toBe(false)
    }
  })

  it('in the wrong field, twice, or as JSON is refused', async () => {
    const { sam, item, app } = shelf()
    const bytes = await noise(16, 16).png().toBuffer()
    const path = `/api/items/${item.id}/photos`
    expect((await sam.agent.post(path).attach('file', bytes, 'a.png')).status).toBe(400)
    expect(
      (await sam.agent.post(path).attach('photo', bytes, 'a.png').attach('photo', bytes, 'b.png')).status,
    ).toBe(400)
    expect((await sam.agent.post(path).send({ photo: 'x' })).status).toBe(400)
    expect((await post(sam, 'nothing', bytes)).status).toBe(404)
    expect(kept(app)).toEqual([])
  })
})

describe('the sweep', () => {
  it('removes files that no photo names, and only those', async () => {
    const { app, sam, item } = shelf()
    await post(sam, item.id, await noise(16, 16).png().toBuffer())
    const before = kept(app)
    writeFileSync(join(app.deps.uploadsDir, 'kit', 'stray-file-of-a-crash.full.webp.part'), 'x')
    expect(await sweepPhotoFiles(app.deps)).toBe(1)
    expect(kept(app).sort()).toEqual(before.sort())
  })
})
