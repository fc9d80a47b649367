import type { CalendarDay } from '../time/day.ts'
import { type Dose, doseFor, type Must } from './dose.ts'
import { USUAL_OG, USUAL_VOLUME_LITRES } from './judgement.ts'
import { type Evidence, evidenceOf, type LotReport, lotStanding, type LotStanding } from './lot-evidence.ts'
import { type ProvingTest, provingTest } from './proving.ts'
import { fridgeReason, type Reason, viabilityReasons } from './reasons.ts'
import { type Alive, type PacketFacts, survivalOf, withLot } from './survival.ts'
import { VERDICTS, type AmountUnit, type LotState, type Verdict } from './vocabulary.ts'

/** All that is known of a lot. */
export interface LotFacts {
  state: LotState
  /** Why a steward withdrew it. */
  note: string | null
  reports: readonly LotReport[]
  /** Pitches, reported or not. */
  pitches: number
}

export interface Question {
  on: CalendarDay
  timeZone: string
  /** Left out: one demijohn. */
  volumeLitres?: number | undefined
  /** Left out: middling for what the yeast is meant for. */
  og?: number | undefined
}

export interface Vitality {
  viability: Alive
  verdict: Verdict
  /** The one line of a list. */
  reason: string
  reasons: Reason[]
  pitch: Dose
  proving: ProvingTest | null
  evidence: Evidence
  assumed: Must
}

type Packet = PacketFacts & { unit: AmountUnit }

/**
 * Will it start, and how much to pitch: the storage model, moved by what the packet's lot did, turned into a word, a
 * dose and the reasons.
 *
 * @param remaining what is left, in the packet's unit
 * @param standing what the lot's reports come to, where it is worked out already
 * @throws RangeError when `on` is before the packet was made, or a must is out of range
 */
export function packetVitality(
  packet: Packet,
  remaining: number,
  lot: LotFacts,
  question: Question,
  standing: LotStanding = lotStanding(lot.reports, question.on),
): Vitality {
  const { on } = question
  const viability = withLot(survivalOf(packet, on), standing)
  const must = {
    volumeLitres: question.volumeLitres ?? USUAL_VOLUME_LITRES,
    og: question.og ?? USUAL_OG[packet.use],
  }
  const { dose, advice } = doseFor(packet, viability, must, remaining, question)
  const verdict = worse(advice.verdict, WORST_ALLOWED[lot.state])
  const evidence = evidenceOf(lot.reports, lot.pitches)
  const doubtful = verdict === 'prove-first' || verdict === 'do-not-rely'
  return {
    viability,
    verdict,
    reason: fridgeReason(packet, on),
    reasons: viabilityReasons({ packet, on, evidence, standing, lot }),
    pitch: dose,
    proving: doubtful && lot.state !== 'withdrawn' ? provingTest(packet.unit) : null,
    evidence,
    assumed: must,
  }
}

/** A flagged lot is to be proved, whatever its figures; one that was withdrawn is not to be pitched. */
const WORST_ALLOWED: Record<LotState, Verdict> = {
  sound: 'good',
  flagged: 'prove-first',
  withdrawn: 'do-not-rely',
}

const worse = (a: Verdict, b: Verdict): Verdict => (VERDICTS.indexOf(a) > VERDICTS.indexOf(b) ? a : b)
