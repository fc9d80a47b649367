/** `started` on time, `slow` but in the end, or `none` at all. */
export const OUTCOMES = ['started', 'slow', 'none'] as const
export type Outcome = (typeof OUTCOMES)[number]

/** Best first: the order of the fridge. */
export const VERDICTS = ['good', 'pitch-more', 'prove-first', 'do-not-rely'] as const
export type Verdict = (typeof VERDICTS)[number]

export const EFFECTS = ['lowers', 'raises', 'changes-little'] as const
export type Effect = (typeof EFFECTS)[number]

/** `flagged`: failed twice, a steward is to look. `withdrawn`: a steward took it out of use. */
export const LOT_STATES = ['sound', 'flagged', 'withdrawn'] as const
export type LotState = (typeof LOT_STATES)[number]

export const AMOUNT_UNITS = ['g', 'ml'] as const
export type AmountUnit = (typeof AMOUNT_UNITS)[number]

export const PACKET_MOVES = ['added', 'pitched', 'recounted', 'thrown-away'] as const
export type PacketMove = (typeof PACKET_MOVES)[number]

/** Which packets a list holds: what can be pitched, what is used up or thrown away, or both. */
export const PACKET_STATES = ['at-hand', 'gone', 'all'] as const
export type PacketState = (typeof PACKET_STATES)[number]

/** How a packet stands to its best-before day. */
export const DATE_STATES = ['ahead', 'near', 'past'] as const
export type DateState = (typeof DATE_STATES)[number]
