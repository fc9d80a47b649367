import type { FermentStatus } from '../brewing/index.ts'

/** The word that answers, and a sentence that says what it rests on. */
export const FORECAST_WORDS: Record<FermentStatus, { word: string; sentence: string }> = {
  unknown: {
    word: 'Not enough readings',
    sentence: 'Three readings over a day or more are needed before anything can be said.',
  },
  lag: { word: 'Waiting for it', sentence: 'It has hardly begun to fall. A date would be a guess.' },
  active: { word: 'Working', sentence: 'It falls steadily.' },
  slowing: { word: 'Slowing down', sentence: 'Most of the sugar is gone, and the last of it takes longest.' },
  finished: {
    word: 'Finished',
    sentence: 'No more than a point of change over a week, near where it was expected to end.',
  },
  stuck: { word: 'Stuck', sentence: 'It lies flat well above where it should end.' },
}
