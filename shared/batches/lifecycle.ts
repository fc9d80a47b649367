import type { BatchStatus } from './vocabulary.ts'

/**
 * Where a batch may go from where it is. Yeast, racking and bottling move it on by themselves; its maker may also say so,
 * take one step back after a slip, or give it up. Nothing is un-bottled.
 */
export const BATCH_MOVES: Record<BatchStatus, readonly BatchStatus[]> = {
  planned: ['fermenting', 'abandoned'],
  fermenting: ['planned', 'conditioning', 'bottled', 'abandoned'],
  conditioning: ['fermenting', 'bottled', 'finished', 'abandoned'],
  bottled: ['finished', 'abandoned'],
  finished: ['bottled'],
  abandoned: ['planned', 'fermenting', 'conditioning'],
}

/** True when a batch in one state may be put into another; staying is always allowed. */
export const mayMove = (from: BatchStatus, to: BatchStatus) => from === to || BATCH_MOVES[from].includes(to)

/** Finished or given up: nothing more is planned with it. */
export const isOver = (status: BatchStatus) => status === 'finished' || status === 'abandoned'
