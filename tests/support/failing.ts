import type { Statement } from 'better-sqlite3'
import type { Sqlite } from '#server/db/open'

export class Injected extends Error {}

export interface Failing {
  /** Makes the n-th statement from now on fail, counted from 1; 0: none. */
  failAt: (n: number) => void
  /** Statements run since the last `failAt`. */
  ran: () => number
}

const RUNS = ['run', 'get', 'all', 'iterate'] as const

/** Lets a test break a database at any one statement. Call it before anything is prepared. */
export function failing(sqlite: Sqlite): Failing {
  let count = 0
  let at = 0
  const prepare = sqlite.prepare.bind(sqlite)
  const watched = (statement: Statement): Statement =>
    new Proxy(statement, {
      get(target, name) {
        const value: unknown = Reflect.get(target, name, target)
        if (typeof value !== 'function') return value
        return (...args: unknown[]): unknown => {
          if ((RUNS as readonly unknown[]).includes(name) && ++count === at)
            throw new Injected(`statement ${at}`)
          const answer: unknown = value.apply(target, args)
          return answer === target ? watched(target) : answer
        }
      },
    })
  sqlite.prepare = ((sql: string) => watched(prepare(sql))) as Sqlite['prepare']
  return {
    failAt: (n) => {
      count = 0
      at = n
    },
    ran: () => count,
  }
}
