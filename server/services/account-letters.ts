import type { Tx } from '../db/open.ts'
import type { Deps } from '../deps.ts'
import { ACCOUNT_DRAFTS, type AccountFacts, type AccountKind } from '../mail/letters/accounts.ts'
import type { Draft } from '../mail/letters/letter.ts'
import { queueLetter } from './notices.ts'

type To = { memberId: string } | { toAddress: string }
type AccountLetter = {
  [K in AccountKind]: { kind: K; name: string; dedupeKey: string } & (AccountFacts[K] extends undefined
    ? { facts?: undefined }
    : { facts: AccountFacts[K] })
}[AccountKind]

/** Queues a letter about an account in the transaction of what it reports. These cannot be switched off. */
export function accountLetter(tx: Tx, deps: Deps, { facts, ...letter }: AccountLetter & To) {
  const draft = (ACCOUNT_DRAFTS[letter.kind] as (facts: unknown) => Draft)(facts)
  queueLetter(tx, deps, { ...letter, draft })
}
