import { AGENTS, findAgent } from '#shared/kit/agents'
import type { Item, ItemHistoryEntry } from '#shared/kit/item-contract'
import type { FaultSeverity, ItemStatus } from '#shared/kit/vocabulary'
import { type CalendarDay, parseDay } from '#shared/time/day'
import { dayAt, type Instant } from '#shared/time/instant'
import { dayFrom, dayInWords } from '#shared/time/day-words'
import type { IconName } from '@/components/base/icons'
import type { StateName } from '@/components/base/states'

export const STATUS_WORDS: Record<ItemStatus, string> = {
  'in-service': 'In service',
  repair: 'In repair',
  retired: 'Retired',
  lost: 'Lost',
}

export const SEVERITY_WORDS: Record<FaultSeverity, string> = {
  minor: 'It still works',
  major: 'It does not do its job',
  danger: 'It may hurt someone',
}

export const AGENT_CHOICES = AGENTS.map((agent) => ({ value: agent.code, label: agent.name }))
export const agentName = (agent: string) => findAgent(agent)?.name ?? agent

/** What most needs saying about an item: out of service before dirty, dirty before clean. */
export function itemState(item: Item): StateName {
  if (item.status !== 'in-service') return `item-${item.status}`
  if (!item.serviceable) return 'item-fault'
  return `hygiene-${item.hygiene}`
}

/** `12:40`, as the clocks of the space show it. */
export function clockTime(at: Instant, zone: string): string {
  return new Intl.DateTimeFormat('en-GB', { timeZone: zone, hour: '2-digit', minute: '2-digit' }).format(
    Date.parse(at),
  )
}

/** `today at 12:40`, `Fri 17 Oct` */
export function momentInWords(at: Instant, today: CalendarDay, zone: string): string {
  const on = dayAt(at, zone)
  const day = dayFrom(today, on)
  return on === today ? `${day} at ${clockTime(at, zone)}` : day
}

const text = (value: unknown) => (typeof value === 'string' && value !== '' ? value : undefined)
const amount = (value: unknown) => (typeof value === 'number' ? value : undefined)
const reasonOf = (detail: ItemHistoryEntry['detail']) => text(detail.reason)

interface HistoryWords {
  icon: IconName
  title: string
  more?: string | undefined
}

/** One line of an item's history, in words. */
export function historyInWords({ event, detail, borrowerName }: ItemHistoryEntry): HistoryWords {
  switch (event) {
    case 'added':
      return { icon: 'add', title: 'Put on the shelf' }
    case 'changed':
      return {
        icon: 'edit',
        title: text(detail.from)
          ? `Tag changed from ${text(detail.from)} to ${text(detail.to)}`
          : `Changed: ${String(detail.fields).replace('kindId', 'kind')}`,
        more: reasonOf(detail),
      }
    case 'status-changed':
      return { icon: 'repair', title: statusInWords(text(detail.to)), more: reasonOf(detail) }
    case 'hygiene-recorded':
      return hygieneInWords(detail)
    case 'became-wild':
      return { icon: 'wild', title: 'Kept for wild cultures from here on', more: reasonOf(detail) }
    case 'no-longer-wild':
      return { icon: 'clean', title: 'Back among the clean kit', more: reasonOf(detail) }
    case 'fault-reported':
      return {
        icon: 'damaged',
        title: detail.blocking ? 'Fault reported, out of service' : 'Fault reported',
        more: text(detail.summary),
      }
    case 'fault-resolved':
      return {
        icon: 'pass',
        title: 'Fault settled',
        more: [text(detail.summary), text(detail.note)].filter(Boolean).join(': '),
      }
    case 'calibrated':
      return {
        icon: 'reading',
        title: `Checked in water: ${offsetInWords(amount(detail.offsetSg) ?? 0)}`,
        more: `Read ${(amount(detail.waterReadingSg) ?? 0).toFixed(3)} at ${amount(detail.waterTemperatureC)} °C`,
      }
    case 'photo-added':
      return { icon: 'camera', title: 'Photo added' }
    case 'photo-removed':
      return { icon: 'remove', title: 'Photo removed' }
    case 'checked-out':
      return {
        icon: 'collect',
        title: borrowerName ? `Out with ${borrowerName}` : 'Out on loan',
        more: until(detail.to),
      }
    case 'checked-in':
      return {
        icon: 'return',
        title: borrowerName ? `Back from ${borrowerName}` : 'Back from a loan',
        more: text(detail.condition) === 'ok' ? undefined : text(detail.condition),
      }
  }
}

function until(day: unknown) {
  const on = typeof day === 'string' ? parseDay(day) : undefined
  return on && `Due back ${dayInWords(on)}`
}

function statusInWords(status: string | undefined) {
  switch (status) {
    case 'repair':
      return 'Taken aside for repair'
    case 'retired':
      return 'Retired'
    case 'lost':
      return 'Given up as lost'
    default:
      return 'Back in service'
  }
}

function hygieneInWords(detail: ItemHistoryEntry['detail']): HistoryWords {
  const how = [
    text(detail.agent) && agentName(String(detail.agent)),
    text(detail.concentration),
    amount(detail.contactMinutes) !== undefined && minutesInWords(amount(detail.contactMinutes) ?? 0),
    text(detail.note),
  ].filter(Boolean)
  const more = how.length > 0 ? how.join(', ') : undefined
  if (detail.state === 'sanitised') return { icon: 'sanitised', title: 'Sanitised', more }
  if (detail.state === 'clean') return { icon: 'clean', title: 'Washed and clean', more }
  return { icon: 'wash', title: 'Put down as dirty', more }
}

/** `90 s`, `2 min`, `2 min 30 s` */
export function minutesInWords(minutes: number): string {
  const seconds = Math.round(minutes * 60)
  if (seconds < 60) return `${seconds} s`
  const rest = seconds % 60
  return rest === 0 ? `${seconds / 60} min` : `${Math.floor(seconds / 60)} min ${rest} s`
}

/** `reads true`, `add 0.001`, `take off 0.002` */
export function offsetInWords(offsetSg: number): string {
  const points = Math.abs(offsetSg).toFixed(4).replace(/0$/, '')
  if (Math.abs(offsetSg) < 0.00005) return 'reads true'
  return offsetSg > 0 ? `add ${points}` : `take off ${points}`
}
