import { existsSync, readdirSync } from 'node:fs'
import { join } from 'node:path'
import sharp from 'sharp'
import { describe, expect, it } from 'vitest'
import type { Packet } from '#shared/yeast/contract'
import { people, type Person } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'
import { makePacket } from '#tests/support/makers/yeast'

const picture = (background: string) =>
  sharp({ create: { width: 640, height: 400, channels: 3, background } })
    .withExif({ IFD0: { Copyright: 'sentinel-exif' } })
    .jpeg()
    .toBuffer()

const post = (who: Person, id: string, bytes: Buffer) =>
  who.agent.post(`/api/packets/${id}/photo`).attach('photo', bytes, 'photo.jpg')

const kept = (app: TestApp) => {
  const folder = join(app.deps.uploadsDir, 'yeast')
  return existsSync(folder) ? readdirSync(folder).length : 0
}

describe('the photo of a packet', () => {
  it('is redrawn, shown to whoever sees the packet, and replaced by the next', async () => {
    const app = testApp()
    const { ada, bo } = people(app)
    const { id } = await makePacket(app, ada)
    expect((await bo.agent.get(`/api/packets/${id}/photo`)).status).toBe(404)
    const first = await post(ada, id, await picture('#8a6d3b'))
    expect(first.status).toBe(201)
    const seen = await bo.agent.get(`/api/packets/${id}/photo?size=thumb`).responseType('blob')
    expect(seen.type).toBe('image/webp')
    expect((seen.body as Buffer).includes('sentinel-exif')).toBe(false)
    expect((await sharp(seen.body as Buffer).metadata()).width).toBeLessThanOrEqual(320)
    const second = await post(ada, id, await picture('#204060'))
    expect((second.body as Packet).photoName).not.toBe((first.body as Packet).photoName)
    expect(kept(app)).toBe(2)
    expect((await ada.agent.delete(`/api/packets/${id}/photo`)).status).toBe(204)
    expect((await ada.agent.delete(`/api/packets/${id}/photo`)).status).toBe(404)
    expect(kept(app)).toBe(0)
  })

  it('is its owner’s to set, hidden with a personal packet, and a picture', async () => {
    const app = testApp()
    const { ada, bo, sam } = people(app)
    const shared = await makePacket(app, ada)
    const own = await makePacket(app, ada, { shared: false })
    const bytes = await picture('#fff')
    expect((await post(bo, shared.id, bytes)).status).toBe(403)
    expect((await post(sam, shared.id, bytes)).status).toBe(201)
    expect((await post(sam, own.id, bytes)).status).toBe(404)
    expect((await post(ada, own.id, bytes)).status).toBe(201)
    expect((await sam.agent.get(`/api/packets/${own.id}/photo`)).status).toBe(404)
    expect(
      (await post(ada, shared.id, Buffer.from('<svg xmlns="http://www.w3.org/2000/svg"/>'))).status,
    ).toBe(415)
    expect(kept(app)).toBe(4)
  })
})
