import type { CalendarDay } from '#shared/time/day'
import { longDay } from './days.ts'
import type { Draft } from './letter.ts'

export interface PacketFacts {
  packetId: string
  strain: string
}

export const packetNearBestBefore = (packet: PacketFacts & { bestBefore: CalendarDay }): Draft => ({
  subject: `Use soon: ${packet.strain}, best before ${longDay(packet.bestBefore)}`,
  paragraphs: [
    `Your packet of ${packet.strain} reaches its best-before on ${longDay(packet.bestBefore)}.`,
    'Pitch it, or share it with the space so that someone else does.',
  ],
  act: { label: 'See the packet', path: `/yeast/${packet.packetId}` },
})

export const packetOutcomeWanted = (
  pitch: PacketFacts & { batchId: string; batchName: string; pitchedOn: CalendarDay },
): Draft => ({
  subject: `Did it start? ${pitch.strain} in ${pitch.batchName}`,
  paragraphs: [
    `You pitched ${pitch.strain} into ${pitch.batchName} on ${longDay(pitch.pitchedOn)}.`,
    'Say whether it started, and after how many hours. The next person with this lot pitches better for it.',
  ],
  act: { label: 'Say how it went', path: `/batches/${pitch.batchId}` },
})

export const packetLotFlagged = (packet: PacketFacts & { lotCode: string; failures: number }): Draft => ({
  subject: `Prove it first: ${packet.strain}, lot ${packet.lotCode}`,
  paragraphs: [
    `Lot ${packet.lotCode} of ${packet.strain} has failed to start ${packet.failures} times. You have a packet of it.`,
    'Wake a little of it in warm water with sugar before you trust a batch to it.',
  ],
  act: { label: 'See the packet', path: `/yeast/${packet.packetId}` },
})
