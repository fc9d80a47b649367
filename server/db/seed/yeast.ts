import { eq } from 'drizzle-orm'
import { addDays, type CalendarDay } from '#shared/time/day'
import { addMinutes, instantMs, type Instant } from '#shared/time/instant'
import type { BatchRequest } from '#shared/batches/contract'
import { PacketRequest } from '#shared/yeast/contract'
import type { Outcome } from '#shared/yeast/vocabulary'
import { clockFrom } from '../../clock.ts'
import type { Deps } from '../../deps.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { startBatch } from '../../services/batches/book.ts'
import { withdrawLot } from '../../services/yeast/lots.ts'
import { addPacket, changePacket, discardPacket } from '../../services/yeast/packets.ts'
import { pitchInto, reportOutcome } from '../../services/yeast/pitches.ts'
import { batches } from '../schema/batches.ts'
import { packets } from '../schema/yeast.ts'
import type { SeedContext } from './index.ts'
import { FRIDGE, PAST_PITCHES, WITHDRAWN, type SeedPacket } from './yeast-fridge.ts'

/** A fridge in every state, and lots with a past. Strains are invented; everything goes through the services, at its own time. */
export function seedYeast({ deps, people }: SeedContext) {
  const now = deps.clock.now()
  const today = deps.clock.today()
  const ago = (days: number) => addDays(today, -days)
  const at = (daysAgo: number): Deps => {
    const then = addMinutes(now, -Math.round(daysAgo * 24 * 60))
    return {
      ...deps,
      clock: clockFrom(
        () => instantMs(then),
        () => deps.clock.timeZone,
      ),
    }
  }
  const someone = (login: string): SignedIn => {
    const id = people[login]
    if (!id) throw new Error(`the demo has no ${login}`)
    const role = login.startsWith('steward') ? 'steward' : 'member'
    return { id, name: login, email: `${login}@barmhouse.example`, role, status: 'active' }
  }

  const made = new Map<string, { id: string; lotId: string }>()
  for (const packet of FRIDGE) {
    const added = addPacket(at(packet.addedDaysAgo), someone(packet.by), requestFor(packet, ago))
    made.set(packet.key, { id: added.id, lotId: added.lot.id })
    const change = (daysAgo: number, patch: Parameters<typeof changePacket>[4]) =>
      changePacket(at(daysAgo), someone(packet.by), added.id, versionOf(deps, added.id), patch)
    if (openedLater(packet)) change(packet.openedDaysAgo, { openedOn: ago(packet.openedDaysAgo) })
    if (packet.moved) change(packet.moved.daysAgo, { storage: packet.moved.storage })
  }
  const packetOf = (key: string) => {
    const packet = made.get(key)
    if (!packet) throw new Error(`the demo fridge has no ${key}`)
    return packet
  }

  for (const past of PAST_PITCHES) {
    const who = someone(past.by)
    const batch = startBatch(at(past.daysAgo + 1), who.id, past.batch)
    pitchPast(at, who, { ...past, batch, packetId: packetOf(past.packet).id })
    if (past.over)
      deps.db
        .update(batches)
        .set({ status: 'finished', endedAt: addMinutes(now, -Math.round((past.daysAgo / 3) * 24 * 60)) })
        .where(eq(batches.id, batch.id))
        .run()
  }
  for (const { packet, by, daysAgo, note } of WITHDRAWN)
    withdrawLot(at(daysAgo), someone(by), packetOf(packet).lotId, note)
  for (const { key, by, thrownAwayDaysAgo } of FRIDGE)
    if (thrownAwayDaysAgo !== undefined)
      discardPacket(at(thrownAwayDaysAgo), someone(by), packetOf(key).id, 'Damp got in.')
}

/** Opened here, not before it came. */
const openedLater = (packet: SeedPacket): packet is SeedPacket & { openedDaysAgo: number } =>
  packet.openedDaysAgo !== undefined && packet.openedDaysAgo <= packet.addedDaysAgo

const versionOf = ({ db }: Deps, id: string) =>
  db.select({ version: packets.version }).from(packets).where(eq(packets.id, id)).get()?.version ?? 1

function requestFor(packet: SeedPacket, ago: (days: number) => CalendarDay): PacketRequest {
  const { strain, form, use, lotCode, storage, shared = true, place, note } = packet
  return PacketRequest.parse({
    ...{ strain, form, use, storage, shared },
    ...(lotCode && { lotCode }),
    ...(place && { place }),
    ...(note && { note }),
    ...(packet.madeDaysAgo !== undefined && { madeOn: ago(packet.madeDaysAgo) }),
    ...(packet.bestBeforeInDays !== undefined && { bestBefore: ago(-packet.bestBeforeInDays) }),
    ...(packet.openedDaysAgo !== undefined &&
      !openedLater(packet) && { openedOn: ago(packet.openedDaysAgo) }),
    ...(packet.unit === 'ml'
      ? { initialMl: packet.initial, remainingMl: packet.left ?? packet.initial }
      : { initialGrams: packet.initial, remainingGrams: packet.left ?? packet.initial }),
  })
}

interface Past {
  packetId: string
  batch: { id: string } & Pick<BatchRequest, 'name'>
  daysAgo: number
  grams?: number
  ml?: number
  mustTemperatureC?: number
  outcome?: { outcome: Outcome; hours?: number }
}

function pitchPast(at: (daysAgo: number) => Deps, who: SignedIn, past: Past) {
  const deps = at(past.daysAgo)
  const when: Instant = deps.clock.now()
  const pitch = pitchInto(deps, who, past.batch.id, {
    packetId: past.packetId,
    at: when,
    rehydrated: true,
    mustTemperatureC: past.mustTemperatureC ?? 20,
    ...(past.grams !== undefined && { grams: past.grams }),
    ...(past.ml !== undefined && { ml: past.ml }),
  })
  if (!past.outcome) return
  const { outcome, hours } = past.outcome
  reportOutcome(at(past.daysAgo - Math.min(past.daysAgo, 3.5)), who, pitch.id, {
    outcome,
    hoursToActivity: hours ?? null,
  })
}
