import { addMinutes, type Instant } from '../time/instant.ts'
import { findAgent } from './agents.ts'
import type { HygieneState } from './vocabulary.ts'

export const HYGIENE_WARNINGS = [
  'agent-missing',
  'contact-missing',
  'contact-short',
  'not-a-sanitiser',
  'not-washed-first',
] as const
export type HygieneWarningCode = (typeof HYGIENE_WARNINGS)[number]

export interface HygieneWarning {
  code: HygieneWarningCode
  message: string
}

export interface HygieneAct {
  state: HygieneState
  agent?: string | undefined
  contactMinutes?: number | undefined
}

/** When a sanitising done `at` runs out. 24 hours after 10:00 on the 1st is 10:00 on the 2nd. */
export function sanitisedUntil(at: Instant, sanitisedHours: number): Instant {
  return addMinutes(at, sanitisedHours * 60)
}

/** What an item is at a moment: sanitised runs out and leaves it clean. */
export function hygieneAt(
  item: { hygiene: HygieneState; sanitisedUntil: Instant | null },
  now: Instant,
): HygieneState {
  const over = item.hygiene === 'sanitised' && item.sanitisedUntil !== null && item.sanitisedUntil <= now
  return over ? 'clean' : item.hygiene
}

/**
 * The shortest contact among the published conditions of an agent, in minutes; undefined when none is known. Iodophor:
 * 0.5 (Utah R392-102-10). The label of the product governs.
 */
export function usualContactMinutes(agent: string): number | undefined {
  const times = findAgent(agent)?.usual.map((use) => use.minMinutes) ?? []
  return times.length > 0 ? Math.min(...times) : undefined
}

/** What deserves a second look about a record of cleaning. It is kept all the same: the person who did it knows the label. */
export function hygieneWarnings(act: HygieneAct, before: HygieneState): HygieneWarning[] {
  if (act.state !== 'sanitised') return []
  const warnings: HygieneWarning[] = []
  const warn = (code: HygieneWarningCode, message: string) => void warnings.push({ code, message })
  if (before === 'dirty')
    warn(
      'not-washed-first',
      'It was down as dirty. No sanitiser works through soil: it counts only if you washed it first.',
    )
  if (act.agent === undefined) {
    warn('agent-missing', 'Nothing says what it was sanitised with. The next person would like to know.')
    return warnings
  }
  const agent = findAgent(act.agent)
  if (agent?.kind === 'cleaner') {
    warn('not-a-sanitiser', `${agent.name} cleans, but is not a sanitiser by itself.`)
    return warnings
  }
  const usual = usualContactMinutes(act.agent)
  if (act.contactMinutes === undefined)
    warn(
      'contact-missing',
      'Nothing says how long it was in contact. Time it: the label gives a shortest time.',
    )
  else if (agent && usual !== undefined && act.contactMinutes < usual)
    warn(
      'contact-short',
      `${agent.name} usually wants ${minutes(usual)} or more. The label governs: check it.`,
    )
  return warnings
}

const minutes = (count: number) =>
  count < 1 ? `${Math.round(count * 60)} seconds` : count === 1 ? 'a minute' : `${count} minutes`
