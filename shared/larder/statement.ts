export interface StatementEntry {
  at: string
  /** Order of things at one moment. */
  order: number
  amountMinor: number
}

/**
 * A statement from what happened: in order of time, each with what was owed after it. Entries before `from` make the
 * opening balance; those after `to` are left out. The balance is of all of them.
 */
export function statementOf<Entry extends StatementEntry>(
  entries: readonly Entry[],
  { from, to }: { from?: string; to?: string } = {},
) {
  const sorted = [...entries].sort((a, b) => (a.at === b.at ? a.order - b.order : a.at < b.at ? -1 : 1))
  let balanceMinor = 0
  let openingMinor = 0
  const items: (Entry & { balanceMinor: number })[] = []
  for (const entry of sorted) {
    balanceMinor += entry.amountMinor
    if (from !== undefined && entry.at < from) openingMinor = balanceMinor
    else if (to === undefined || entry.at < to) items.push({ ...entry, balanceMinor })
  }
  return { balanceMinor, openingMinor, items }
}
