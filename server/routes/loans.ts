import { Router } from 'express'
import { calendarEndpoints } from '#shared/loans/calendar-contract'
import { loanEndpoints } from '#shared/loans/contract'
import { deskEndpoints } from '#shared/loans/desk-contract'
import { waitingEndpoints } from '#shared/loans/waiting-contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { readCalendar } from '../services/calendar.ts'
import { readDesk } from '../services/desk.ts'
import { bookBasket, bookLoan } from '../services/loans/book.ts'
import { approveLoan, cancelLoan, declineLoan } from '../services/loans/decide.ts'
import { extendLoan } from '../services/loans/extend.ts'
import { checkInLoan, checkOutLoan } from '../services/loans/hand-over.ts'
import { changeNote, listLoans, readLoan } from '../services/loans/read.ts'
import { kindAvailability, shelfAvailability } from '../services/loans/shelf.ts'
import { joinWaiting, leaveWaiting, listWaitings } from '../services/loans/waiting.ts'

export const loanRoutes = (deps: Deps): Router =>
  Router().use(
    serve(deps, loanEndpoints, {
      kindAvailability: ({ params, query }, { user }) => kindAvailability(deps, user.id, params.id, query),
      availability: ({ query }, { user }) => shelfAvailability(deps, user.id, query),
      list: ({ query }, { user }) => listLoans(deps, user, query),
      book: ({ body }, { user }) => bookLoan(deps, user, body),
      bookBasket: ({ body }, { user }) => bookBasket(deps, user, body),
      get: ({ params }, { user }) => readLoan(deps, user, params.id),
      change: ({ params, body }, { user, version }) => changeNote(deps, user, params.id, version, body.note),
      approve: ({ params }, { user }) => approveLoan(deps, user, params.id),
      decline: ({ params, body }, { user }) => declineLoan(deps, user, params.id, body.reason),
      cancel: ({ params, body }, { user }) => cancelLoan(deps, user, params.id, body.reason),
      checkOut: ({ params, body }, { user }) => checkOutLoan(deps, user, params.id, body),
      checkIn: ({ params, body }, { user }) => checkInLoan(deps, user, params.id, body),
      extend: ({ params, body }, { user }) => extendLoan(deps, user, params.id, body),
    }),
    serve(deps, waitingEndpoints, {
      list: ({ query }, { user }) => listWaitings(deps, user, query),
      wait: ({ body }, { user }) => joinWaiting(deps, user, body),
      leave: ({ params }, { user }) => leaveWaiting(deps, user, params.id),
    }),
    serve(deps, deskEndpoints, { desk: () => readDesk(deps) }),
    serve(deps, calendarEndpoints, { month: ({ query }, { user }) => readCalendar(deps, user, query) }),
  )
