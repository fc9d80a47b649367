import type { Question } from '../question.ts'
import { BEFORE } from './before.ts'
import { BOTTLING } from './bottling.ts'
import { CLEANING } from './cleaning.ts'
import { PITCHING } from './pitching.ts'
import { WORKING } from './working.ts'

export const QUESTIONS: readonly Question[] = [...BEFORE, ...PITCHING, ...WORKING, ...BOTTLING, ...CLEANING]

export const questionOf = (id: unknown): Question | undefined =>
  QUESTIONS.find((question) => question.id === id)
