import { eq } from 'drizzle-orm'
import { describe, expect, it } from 'vitest'
import { day } from '#shared/time/day'
import { letters } from '#server/db/schema/notices'
import { members } from '#server/db/schema/people'
import { write } from '#server/db/open'
import { queueNotice } from '#server/services/notices'
import { people } from '#tests/support/people'
import { testApp, type TestApp } from '#tests/support/test-app'

const approved = (app: TestApp, memberId: string, kindName = 'Demijohn 4.5 L, glass') =>
  write(app.db, (tx) =>
    queueNotice(tx, app.deps, {
      kind: 'loan-approved',
      memberId,
      about: { type: 'loan', id: 'loan-1', on: day('2031-06-20') },
      dedupeKey: 'loan-approved:loan-1',
      facts: { loanId: 'loan-1', kindName, from: day('2031-05-20'), to: day('2031-06-20') },
    }),
  )

const outbox = (app: TestApp) => app.db.select().from(letters).all()

describe('queueing a letter', () => {
  it('writes it once, whatever is tried', () => {
    const app = testApp()
    const { ada } = people(app)
    expect(approved(app, ada.id)).toBeDefined()
    expect(approved(app, ada.id)).toBeUndefined()
    const [letter, ...more] = outbox(app)
    expect(more).toEqual([])
    expect(letter).toMatchObject({ status: 'queued', memberId: ada.id, tries: 0, aboutId: 'loan-1' })
    expect(letter?.subject).toBe('Approved: Demijohn 4.5 L, glass, from Tuesday 20 May 2031')
    expect(letter?.text).toContain('http://localhost:3000/loans/loan-1')
  })

  it('leaves nothing behind when the act it reports is undone', () => {
    const app = testApp()
    const { ada } = people(app)
    expect(() =>
      write(app.db, (tx) => {
        tx.update(members).set({ name: 'Changed' }).where(eq(members.id, ada.id)).run()
        queueNotice(tx, app.deps, {
          kind: 'loan-lapsed',
          memberId: ada.id,
          dedupeKey: 'loan-lapsed:loan-2',
          facts: { loanId: 'loan-2', kindName: 'Siphon', from: day('2031-05-01'), to: day('2031-05-04') },
        })
        throw new Error('the act failed')
      }),
    ).toThrow('the act failed')
    expect(outbox(app)).toEqual([])
    expect(app.db.select().from(members).where(eq(members.id, ada.id)).get()?.name).toBe('Ada Marsh')
  })

  it('cannot be made to carry another header or another tag', () => {
    const app = testApp()
    const { ada } = people(app)
    approved(app, ada.id, 'Jar\r\nBcc: all@barmhouse.example\u2028<script>alert(1)</script>\u202e')
    const [letter] = outbox(app)
    expect(letter?.subject).toBe(
      'Approved: Jar Bcc: all@barmhouse.example <script>alert(1)</script>, from Tuesday 20 May 2031',
    )
    expect(letter?.html).not.toContain('<script>')
    expect(letter?.html).toContain('&lt;script&gt;')
  })
})
