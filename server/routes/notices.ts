import { noticeEndpoints } from '#shared/notices/contract'
import type { Deps } from '../deps.ts'
import { serve } from '../http/serve.ts'
import { getCaught, getLetter, listCaught, listLetters, retryLetter } from '../services/mail-record.ts'
import { choosePreferences, preferencesOf, stopByLink, stopInfo } from '../services/notice-preferences.ts'

export const noticeRoutes = (deps: Deps) =>
  serve(deps, noticeEndpoints, {
    preferences: (_input, { user }) => preferencesOf(deps.db, user),
    choose: ({ body }, { user, version }) => choosePreferences(deps, user, version, body),
    letters: ({ query }) => listLetters(deps, query),
    letter: ({ params }) => getLetter(deps.db, params.id),
    retry: ({ params }) => retryLetter(deps, params.id),
    stopInfo: ({ params }) => stopInfo(deps.db, params.token),
    stop: ({ params }) => stopByLink(deps, params.token),
    caught: ({ query }) => listCaught(deps, query),
    caughtLetter: ({ params }) => getCaught(deps, params.id),
  })
