import { write, type Db, type Tx } from '../../db/open.ts'

/** Carries the answer out of a transaction that is rolled back. */
class Rehearsed<T> extends Error {
  readonly answer: T

  constructor(answer: T) {
    super('rehearsed')
    this.answer = answer
  }
}

/** Does something for real, keeps the answer and undoes the rest: what is shown beforehand is what would happen. */
export function rehearse<T>(db: Db | Tx, act: (tx: Tx) => T): T {
  try {
    return write(db, (tx): T => {
      throw new Rehearsed(act(tx))
    })
  } catch (error) {
    if (error instanceof Rehearsed) return error.answer as T
    throw error
  }
}
