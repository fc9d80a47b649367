export interface CautionParts {
  /** The sentence that is always in sight. */
  caution: string
  /** Why; undefined when nothing follows. */
  why: string | undefined
}

/**
 * A caution as it is kept, in its two parts: its first sentence, and the reason after it.
 * "Carry it by the base. The ring is not made for the weight." gives "Carry it by the base." and the rest.
 */
export function splitCaution(text: string): CautionParts {
  const end = /[.!?](?=\s+\p{Lu})/u.exec(text)
  if (!end) return { caution: text, why: undefined }
  return { caution: text.slice(0, end.index + 1), why: text.slice(end.index + 1).trim() }
}
