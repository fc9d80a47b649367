import { AppError } from '../../errors.ts'

/**
 * Turns what the guard inside the database says into a refusal. The rules are asked first, so this speaks only when a rule and
 * the guard see different things.
 */
export function guarded<T>(act: () => T): T {
  try {
    return act()
  } catch (error) {
    const said = error instanceof Error ? error.message : ''
    if (said.includes('KIND_FULL')) throw new AppError('not-available', 'Not free on all of those days.')
    if (said.includes('ITEM_OUT')) throw new AppError('not-available', 'That item is out on another loan.')
    throw error
  }
}
