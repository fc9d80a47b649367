import { numberIn } from '../http/fields.ts'

/** Gravities a must or a drink can have, corrected. */
export const Gravity = numberIn(0.98, 1.2)
/** What a hydrometer can show; very dry drinks lie lowest. */
export const RawGravity = numberIn(0.98, 1.16)
