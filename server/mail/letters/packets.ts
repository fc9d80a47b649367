import type { CalendarDay } from '#shared/time/day'
import { longDay } from './days.ts'
import type { Draft } from './letter.ts'

export const packetNearBestBefore = (packet: {
  packetId: string
  strain: string
  bestBefore: CalendarDay
}): Draft => ({
  subject: `Use soon: ${packet.strain}, best before ${longDay(packet.bestBefore)}`,
  paragraphs: [
    `Your packet of ${packet.strain} reaches its best-before on ${longDay(packet.bestBefore)}.`,
    'Pitch it, or share it with the space so that someone else does.',
  ],
  act: { label: 'See the packet', path: `/yeast/${packet.packetId}` },
})

export const packetOutcomeWanted = (pitch: {
  pitchId: string
  strain: string
  batchName: string
  pitchedOn: CalendarDay
}): Draft => ({
  subject: `Did it start? ${pitch.strain} in ${pitch.batchName}`,
  paragraphs: [
    `You pitched ${pitch.strain} into ${pitch.batchName} on ${longDay(pitch.pitchedOn)}.`,
    'Say whether it started, and after how many hours. The next person with this lot pitches better for it.',
  ],
  act: { label: 'Say how it went', path: `/pitches/${pitch.pitchId}/outcome` },
})

export const packetLotFlagged = (lot: {
  strain: string
  /** Not known for a packet without one. */
  lotCode: string | undefined
  failures: number
  /** A packet of it that the reader may see. */
  packetId?: string
  /** The reader has one; else they read it as a steward. */
  yours: boolean
}): Draft => {
  const name = lot.lotCode ? `${lot.strain}, lot ${lot.lotCode}` : lot.strain
  const failed = `${name} has failed to start ${lot.failures} times.`
  return {
    subject: `Prove it first: ${name}`,
    paragraphs: lot.yours
      ? [
          `${failed} You have a packet of it.`,
          'Wake a little of it in warm water with sugar before you trust a batch to it.',
        ]
      : [
          failed,
          'It is flagged until a steward looks at it: withdraw the lot, or put it back in use if the failures had another cause.',
        ],
    act: lot.packetId
      ? { label: 'See the packet', path: `/yeast/${lot.packetId}` }
      : { label: 'See the fridge', path: '/yeast' },
  }
}
