import { describe, expect, it } from 'vitest'
import { NOTICE_KINDS, type NoticeKind } from '#shared/notices/vocabulary'
import { day } from '#shared/time/day'
import type { Instant } from '#shared/time/instant'
import { longDay, longMoment } from '#server/mail/letters/days'
import { draftOf, type NoticeFacts } from '#server/mail/letters/drafts'
import { layOut, withStopLink } from '#server/mail/letters/letter'

const loan = {
  loanId: 'l1',
  kindName: 'Demijohn 4.5 L, glass',
  from: day('2031-05-20'),
  to: day('2031-06-20'),
}
const batch = { batchId: 'b1', batchName: 'Windfall cyser' }

const FACTS: { [K in NoticeKind]: NoticeFacts[K] } = {
  'loan-approved': loan,
  'loan-declined': { ...loan, reason: 'The shelf is being mended.' },
  'loan-cancelled': loan,
  'loan-lapsed': loan,
  'loan-collect-tomorrow': { ...loan, collectBy: day('2031-05-21') },
  'loan-due-soon': { ...loan, tag: 'DJ-07' },
  'loan-due-today': loan,
  'loan-overdue': loan,
  'loan-at-risk': { ...loan, reason: 'overdue' },
  'loan-safe-again': loan,
  'loan-extended': loan,
  'loan-extension-declined': loan,
  'waiting-offer': { ...loan, kindId: 'k1', takeBy: '2031-05-06T13:30:00.000Z' as Instant },
  'batch-step-due': { ...batch, stepName: 'Rack', on: day('2031-05-12') },
  'batch-outlasts-loan': {
    ...batch,
    kindName: loan.kindName,
    to: loan.to,
    likelyOn: day('2031-06-24'),
    keepTo: day('2031-07-05'),
    atOnce: true,
  },
  'packet-near-best-before': { packetId: 'p1', strain: 'Fenland Ale', bestBefore: day('2031-06-05') },
  'packet-outcome-wanted': {
    pitchId: 'x1',
    strain: 'Fenland Ale',
    batchName: batch.batchName,
    pitchedOn: day('2031-05-01'),
  },
  'packet-lot-flagged': { strain: 'Fenland Ale', lotCode: 'F12', failures: 2, packetId: 'p1', yours: true },
  'steward-digest': { on: day('2031-05-12'), counts: [['To approve', 2]] },
}

const to = { name: 'Ada Marsh', space: 'The Old Cellar', appUrl: 'https://kit.barmhouse.example' }
const write = (kind: NoticeKind) => layOut(draftOf(kind, FACTS[kind], 'Europe/London'), to)

describe.each(NOTICE_KINDS)('the letter %s', (kind) => {
  const { subject, text, html } = write(kind)

  it('is true on whichever day it is read: days in full, nothing left blank', () => {
    expect(text).toMatch(/^Hello Ada Marsh,\n/)
    for (const words of [subject, text])
      expect(words).not.toMatch(/tomorrow|yesterday|undefined|null|NaN|\[object|\d{4}-\d\d-\d\d/i)
    expect(subject).not.toMatch(/\btoday\b/i)
    expect(subject.length).toBeLessThanOrEqual(150)
    expect(subject).toMatch(/^[^\p{Cc}]+$/u)
  })

  it('says what to do, with one link, into this app', () => {
    const links = text.match(/https?:\/\/\S+/g) ?? []
    expect(links).toHaveLength(1)
    expect(links[0]).toMatch(/^https:\/\/kit\.barmhouse\.example\//)
    expect(html.match(/href="([^"]*)"/g)).toEqual([`href="${links[0]}"`])
  })

  it('says the same in HTML, which loads nothing and runs nothing', () => {
    expect(html).not.toMatch(/<(script|img|link|iframe|form|object|svg)|url\(|@import/i)
    const plain = html
      .replace(/<[^>]+>/g, ' ')
      .replace(/&#39;/g, '’')
      .replace(/\s+/g, ' ')
    for (const paragraph of draftOf(kind, FACTS[kind], 'Europe/London').paragraphs)
      expect(plain).toContain(paragraph.replace(/\s+/g, ' '))
  })
})

describe('a line that stops letters', () => {
  it('stands in both forms, and in neither before it is asked for', () => {
    const letter = write('steward-digest')
    expect(letter.text + letter.html).not.toMatch(/stop letters/i)
    const stopped = withStopLink(letter, 'https://kit.barmhouse.example/unsubscribe/$&abc')
    expect(stopped.text).toContain('https://kit.barmhouse.example/unsubscribe/$&abc')
    expect(stopped.html).toContain('href="https://kit.barmhouse.example/unsubscribe/$&amp;abc"')
  })
})

describe('days and moments', () => {
  it('are written out, moments by the clock of the space', () => {
    expect(longDay(day('2031-05-09'))).toBe('Friday 9 May 2031')
    expect(longMoment('2031-07-01T23:30:00.000Z' as Instant, 'Europe/London')).toBe(
      'Wednesday 2 July 2031, 00:30',
    )
    expect(longMoment('2031-01-01T00:00:00.000Z' as Instant, 'America/New_York')).toBe(
      'Tuesday 31 December 2030, 19:00',
    )
  })
})
