import { mkdtempSync, mkdirSync, readFileSync, writeFileSync, existsSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import request from 'supertest'
import { describe, expect, it } from 'vitest'
import { auditTrail } from '#server/db/schema/space'
import { members } from '#server/db/schema/people'
import { openDb } from '#server/db/open'
import { backUpHourly } from '#server/jobs/hourly-backup'
import { backUpTo, BackupError, lettingGo, listBackups, restoreFrom } from '#server/services/backup'
import { checkAudit } from '#server/services/audit'
import { people, person } from '#tests/support/people'
import { testApp } from '#tests/support/test-app'

const folder = () => mkdtempSync(join(tmpdir(), 'barmhouse-test-'))

describe('the settings of the space', () => {
  it('are changed by admins, with the version that was seen', async () => {
    const app = testApp()
    const { ada, sam, kit } = people(app)
    const change = { name: 'Weir Lane Cellar', openDays: ['tuesday', 'saturday'], roomM3: 48.5 }
    for (const who of [ada, sam])
      expect((await who.agent.patch('/api/space').set('If-Match', '"1"').send(change)).status).toBe(403)
    const changed = await kit.agent.patch('/api/space').set('If-Match', '"1"').send(change)
    expect(changed.body).toMatchObject({ ...change, version: 2 })
    expect((await kit.agent.patch('/api/space').set('If-Match', '"1"').send(change)).status).toBe(412)
    expect((await ada.agent.get('/api/space')).body).toMatchObject({ name: 'Weir Lane Cellar' })
    expect((await request(app.app).get('/api/space/brief')).body).toMatchObject({ name: 'Weir Lane Cellar' })
  })

  it('refuse what makes no sense, field by field', async () => {
    const app = testApp()
    const { kit } = people(app)
    const bad = { timeZone: 'Middle/Earth', currency: 'pounds', openDays: [], mailHour: 25, roomM3: -1 }
    const reply = await kit.agent.patch('/api/space').set('If-Match', '"1"').send(bad)
    expect(reply.status).toBe(400)
    const paths = (reply.body as { errors: { path: string }[] }).errors.map((e) => e.path)
    expect(paths.sort()).toEqual(['currency', 'mailHour', 'openDays', 'roomM3', 'timeZone'])
  })
})

describe('the audit trail', () => {
  it('keeps sign-ins, refusals and what stewards and admins change', async () => {
    const app = testApp()
    const { ada, kit } = people(app)
    await ada.agent.get('/api/members')
    await request(app.app).post('/api/session').send({ email: ada.email, password: 'not this one' })
    await kit.agent.patch(`/api/members/${ada.id}`).set('If-Match', '"1"').send({ role: 'steward' })
    const { items } = (await kit.agent.get('/api/audit')).body as { items: Record<string, unknown>[] }
    expect(items.map((e) => [e.actorName, e.action, e.subject, e.outcome])).toEqual([
      ['Kit Harrow', 'PATCH /members/:id', ada.id, 'done'],
      ['Ada Marsh', 'POST /session', null, 'signed-out'],
      ['Ada Marsh', 'GET /members', null, 'forbidden'],
    ])
    expect((await ada.agent.get('/api/audit')).status).toBe(401)
  })

  it('cannot be changed, and shows where it was tampered with', () => {
    const app = testApp()
    const { kit } = people(app)
    const sqlite = app.db.$client
    const note = sqlite.prepare(
      `INSERT INTO audit_trail SELECT ?, '2031-01-01T00:00:00.000Z', ?, 'x', NULL, 'done', 'y'`,
    )
    expect(checkAudit(app.db)).toEqual({ entries: 0, brokenAt: null })
    note.run(1, kit.id)
    expect(() => app.db.update(auditTrail).set({ outcome: 'changed' }).run()).toThrow()
    expect(() => app.db.delete(auditTrail).run()).toThrow()
    expect(checkAudit(app.db)).toEqual({ entries: 1, brokenAt: 1 })
  })
})

describe('a backup', () => {
  it('comes back with every row and every file, and is checked before it counts', async () => {
    const dir = folder()
    const file = join(dir, 'space.db')
    const app = testApp({ file })
    person(app, 'Ada Marsh')
    const uploads = join(dir, 'uploads')
    mkdirSync(join(uploads, 'deep'), { recursive: true })
    const photo = Buffer.from([0xff, 0xd8, 0, 1, 2, 255])
    writeFileSync(join(uploads, 'deep', 'a.webp'), photo)
    const copy = join(dir, 'copy.db')
    await backUpTo(app.db.$client, uploads, copy)
    person(app, 'Too Late')
    app.db.$client.close()

    writeFileSync(join(uploads, 'deep', 'a.webp'), 'spoiled')
    expect(restoreFrom(copy, file, uploads)).toEqual({ files: 1 })
    const restored = openDb(file)
    expect(restored.select({ name: members.name }).from(members).all()).toEqual([{ name: 'Ada Marsh' }])
    expect(readFileSync(join(uploads, 'deep', 'a.webp'))).toEqual(photo)
    expect(existsSync(`${file}.before-restore`)).toBe(true)
    restored.$client.close()
  })

  it('is not taken from a file that is none, and leaves what is there alone', () => {
    const dir = folder()
    const file = join(dir, 'space.db')
    openDb(file).$client.close()
    const before = readFileSync(file)
    const bad = join(dir, 'bad.db')
    writeFileSync(bad, 'this is no database at all, nor a backup')
    expect(() => restoreFrom(bad, file, dir)).toThrow(BackupError)
    expect(() => restoreFrom(join(dir, 'absent'), file, dir)).toThrow(BackupError)
    expect(readFileSync(file)).toEqual(before)
  })

  it('is made once an hour while the application runs', async () => {
    const app = testApp({ file: join(folder(), 'space.db') })
    await backUpHourly(app.deps)
    app.clock.advance({ minutes: 30 })
    await backUpHourly(app.deps)
    expect(listBackups(app.deps)).toHaveLength(1)
    app.clock.advance({ minutes: 31 })
    await backUpHourly(app.deps)
    expect(listBackups(app.deps)).toHaveLength(2)
    app.db.$client.close()
  })

  it('is let go by age: all of a day, then daily, weekly and monthly', () => {
    const name = (on: string, hour: string) => `barmhouse-${on}T${hour}0000Z.db`
    const names = [
      name('2031-05-06', '09'),
      name('2031-05-06', '10'),
      name('2031-05-02', '09'),
      name('2031-05-02', '10'),
      name('2031-04-20', '09'),
      name('2031-04-19', '09'),
      name('2031-01-31', '09'),
      name('2031-01-01', '09'),
      name('2029-01-01', '09'),
    ]
    expect(lettingGo(names, '2031-05-06T11:00:00.000Z')).toEqual([
      name('2031-05-02', '09'),
      name('2031-04-19', '09'),
      name('2031-01-01', '09'),
      name('2029-01-01', '09'),
    ])
  })
})
