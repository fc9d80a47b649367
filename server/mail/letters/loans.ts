import type { CalendarDay } from '#shared/time/day'
import type { Instant } from '#shared/time/instant'
import type { RiskReason } from '#shared/loans/vocabulary'
import { longDay, longMoment } from './days.ts'
import type { Draft } from './letter.ts'

export interface LoanFacts {
  loanId: string
  kindName: string
  from: CalendarDay
  to: CalendarDay
}

const page = (loanId: string): `/${string}` => `/loans/${loanId}`
const days = ({ from, to }: LoanFacts): [string, string][] => [
  ['Collect on', longDay(from)],
  ['Bring back by', longDay(to)],
]

export const loanApproved = (loan: LoanFacts): Draft => ({
  subject: `Approved: ${loan.kindName}, from ${longDay(loan.from)}`,
  paragraphs: [
    `Your booking of ${loan.kindName} is approved. A steward hands it to you on the day.`,
    'Plans changed? Cancel it, so that someone else can have it.',
  ],
  facts: days(loan),
  act: { label: 'See your booking', path: page(loan.loanId) },
})

export const loanDeclined = (loan: LoanFacts & { reason: string }): Draft => ({
  subject: `Declined: ${loan.kindName}, from ${longDay(loan.from)}`,
  paragraphs: [
    `A steward could not approve your booking of ${loan.kindName}. The reason given: ${loan.reason}`,
    'Other days or another kind may do. Look at what is free.',
  ],
  facts: days(loan),
  act: { label: 'See what is free', path: '/kit' },
})

export const loanCancelled = (loan: LoanFacts & { reason?: string }): Draft => ({
  subject: `Cancelled: ${loan.kindName}, from ${longDay(loan.from)}`,
  paragraphs: [
    `Your booking of ${loan.kindName} was cancelled.${loan.reason ? ` The reason given: ${loan.reason}` : ''}`,
    'If that surprises you, ask a steward.',
  ],
  facts: days(loan),
  act: { label: 'See what is free', path: '/kit' },
})

export const loanLapsed = (loan: LoanFacts): Draft => ({
  subject: `Not collected: ${loan.kindName}, booked from ${longDay(loan.from)}`,
  paragraphs: [
    `Nobody came for the ${loan.kindName} you had booked, so it is free for others again.`,
    'Still want it? Book it for other days.',
  ],
  facts: days(loan),
  act: { label: 'Book again', path: '/kit' },
})

export const loanCollect = (loan: LoanFacts & { collectBy: CalendarDay }): Draft => ({
  subject: `Collect on ${longDay(loan.from)}: ${loan.kindName}`,
  paragraphs: [
    `${loan.kindName} is yours from ${longDay(loan.from)}. Come and collect it while a steward is in.`,
    `Not collected by the end of ${longDay(loan.collectBy)}, it goes back to the shelf.`,
  ],
  facts: days(loan),
  act: { label: 'See your booking', path: page(loan.loanId) },
})

export const loanDue = (loan: LoanFacts & { tag?: string }): Draft => ({
  subject: `Due back ${longDay(loan.to)}: ${named(loan)}`,
  paragraphs: [
    `${named(loan)} is due back on ${longDay(loan.to)}. Rinse it and bring it in by then.`,
    'Still fermenting? Ask for more days before it is late. Do not bottle early to be on time.',
  ],
  act: { label: 'Ask for more days, or see the loan', path: page(loan.loanId) },
})

export const loanOverdue = (loan: LoanFacts & { tag?: string }): Draft => ({
  subject: `Late: ${named(loan)} was due back ${longDay(loan.to)}`,
  paragraphs: [
    `${named(loan)} was due back on ${longDay(loan.to)} and is still with you. Others may be waiting for it.`,
    'Bring it in, or ask for more days and say when it will be back.',
  ],
  act: { label: 'See the loan', path: page(loan.loanId) },
})

export const loanAtRisk = (loan: LoanFacts & { reason: RiskReason }): Draft => ({
  subject: `At risk: ${loan.kindName}, from ${longDay(loan.from)}`,
  paragraphs: [
    `${WHY[loan.reason]} Your booking of ${loan.kindName} may find nothing on the shelf.`,
    'You keep your place. The stewards know and will try to mend it; choosing other days now is the safe way.',
  ],
  facts: days(loan),
  act: { label: 'See your booking', path: page(loan.loanId) },
})

const WHY: Record<RiskReason, string> = {
  overdue: 'Someone before you has not brought theirs back.',
  'out-of-service': 'One has been taken out of service.',
}

export const loanSafeAgain = (loan: LoanFacts): Draft => ({
  subject: `Safe again: ${loan.kindName}, from ${longDay(loan.from)}`,
  paragraphs: [`There will be a ${loan.kindName} for you after all. Your booking stands as it was.`],
  facts: days(loan),
  act: { label: 'See your booking', path: page(loan.loanId) },
})

export const loanExtended = (loan: LoanFacts): Draft => ({
  subject: `Yours until ${longDay(loan.to)}: ${loan.kindName}`,
  paragraphs: [`You can keep the ${loan.kindName} until ${longDay(loan.to)}. Nobody is delayed by it.`],
  act: { label: 'See the loan', path: page(loan.loanId) },
})

export const loanExtensionDeclined = (loan: LoanFacts & { reason?: string }): Draft => ({
  subject: `Due back ${longDay(loan.to)} as before: ${loan.kindName}`,
  paragraphs: [
    `You asked to keep the ${loan.kindName} longer, and a steward could not grant it.` +
      (loan.reason ? ` The reason given: ${loan.reason}` : ''),
    `It is due back on ${longDay(loan.to)}, as before. If your batch cannot move by then, talk to a steward.`,
  ],
  act: { label: 'See the loan', path: page(loan.loanId) },
})

export const waitingOffer = (
  offer: { kindId: string; kindName: string; from: CalendarDay; to: CalendarDay; takeBy: Instant },
  zone: string,
): Draft => ({
  subject: `Your turn: ${offer.kindName}, from ${longDay(offer.from)}`,
  paragraphs: [
    `A ${offer.kindName} has come free for the days you are waiting for. It is held for you.`,
    `Take it by ${longMoment(offer.takeBy, zone)}; after that the next in line is asked.`,
  ],
  facts: [
    ['Collect on', longDay(offer.from)],
    ['Bring back by', longDay(offer.to)],
  ],
  act: { label: 'Take it', path: `/kit/${offer.kindId}` },
})

const named = (loan: { kindName: string; tag?: string }) =>
  loan.tag ? `${loan.kindName} (${loan.tag})` : loan.kindName
