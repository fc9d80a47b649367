import { and, eq, gt } from 'drizzle-orm'
import type { Move, MoveRequest } from '#shared/larder/contract'
import { suggestDraw, useByDay } from '#shared/larder/expiry'
import { effectOf, effectOfUndoing, undoRefusal, UNDO_MINUTES, type UndoRefusal } from '#shared/larder/ledger'
import { fromMilli, isWholeWhereCounted, quantityWords, toMilli } from '#shared/larder/quantity'
import { roleCovers } from '#shared/people/vocabulary'
import { ingredients, lots } from '../../db/schema/larder.ts'
import { write, type Tx } from '../../db/open.ts'
import type { Deps } from '../../deps.ts'
import { AppError, invalidField, notFound } from '../../errors.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { ownBatch } from '../batches/access.ts'
import { spaceBrief } from '../space.ts'
import { ingredientRow, type IngredientRow } from './ingredients.ts'
import { lotRow, type LotRow } from './lots.ts'
import { moveReply, moveRow } from './move-replies.ts'
import { recordMove } from './moves.ts'

/**
 * Draws, tops up, writes off or recounts one lot.
 * @throws AppError `not-enough` with what remains, `forbidden` for a recount by a member, `not-found`, `invalid`
 */
export function moveLot(deps: Deps, user: SignedIn, lotId: string, request: MoveRequest): Move {
  return write(deps.db, (tx) => {
    const { lot, ingredient } = lotRow(tx, lotId)
    checkRequest(user, ingredient, request)
    if (request.batchId) ownBatch(tx, user.id, request.batchId)
    return moveReply(deps, user, moveRow(tx, applyMove(deps, tx, user.id, lot, ingredient, request)))
  })
}

function checkRequest(user: SignedIn, ingredient: IngredientRow, request: MoveRequest) {
  const { reason, quantity } = request
  if (reason === 'recount' && !roleCovers(user.role, 'steward'))
    throw new AppError('forbidden', 'Only a steward can recount a lot. Tell one what you found.')
  if (reason !== 'recount' && quantity === 0) throw invalidField('quantity', 'More than 0.')
  if (!isWholeWhereCounted(quantity, ingredient.unit))
    throw invalidField('quantity', `${ingredient.name} is counted in whole pieces.`)
  if (request.batchId !== undefined && reason !== 'draw')
    throw invalidField('batchId', 'Only a draw goes into a batch.')
  if (request.costMinor !== undefined && reason !== 'top-up')
    throw invalidField('costMinor', 'Only a top-up has a cost of its own.')
}

function applyMove(
  deps: Deps,
  tx: Tx,
  memberId: string,
  lot: LotRow,
  ingredient: IngredientRow,
  request: MoveRequest,
): string {
  const outcome = effectOf(lot, {
    reason: request.reason,
    milli: toMilli(request.quantity),
    ...(request.costMinor !== undefined && { costMinor: request.costMinor }),
  })
  if (!outcome.ok) throw notEnough(ingredient, fromMilli(lot.remainingMilli))
  const id = recordMove(tx, {
    lotId: lot.id,
    lot,
    effect: outcome.effect,
    reason: request.reason,
    memberId,
    batchId: request.batchId ?? null,
    note: request.note || null,
    at: deps.clock.now(),
  })
  if (request.reason === 'draw' && lot.openedOn === null && ingredient.unit !== 'each')
    markOpened(deps, tx, lot, ingredient)
  return id
}

/** Who draws from a closed lot opens it. */
function markOpened(deps: Deps, tx: Tx, lot: LotRow, { keepsOpenedDays }: IngredientRow) {
  const openedOn = deps.clock.today()
  const useBy = useByDay({ bestBefore: lot.bestBefore, openedOn, keepsOpenedDays })
  tx.update(lots)
    .set({ openedOn, useBy, updatedAt: deps.clock.now(), version: lot.version + 1 })
    .where(eq(lots.id, lot.id))
    .run()
}

function notEnough(ingredient: IngredientRow, remaining: number) {
  const words = quantityWords(remaining, ingredient.unit)
  const detail =
    remaining === 0
      ? `This lot of ${ingredient.name} is empty. Try another.`
      : `There is ${words} of ${ingredient.name} left in this lot. Take less, or the rest from another.`
  return new AppError('not-enough', detail, { body: { remaining, unit: ingredient.unit } })
}

interface IngredientDraw {
  quantity: number
  batchId?: string | undefined
  note?: string | undefined
}

/**
 * Takes a quantity from as many lots as it needs, first expiring first; from none when they cannot give it all.
 * @throws AppError `not-enough` with what is in date
 */
export function drawIngredient(deps: Deps, user: SignedIn, ingredientId: string, draw: IngredientDraw) {
  return write(deps.db, (tx) => {
    const ingredient = ingredientRow(tx, ingredientId)
    const request = { ...draw, reason: 'draw' as const }
    checkRequest(user, ingredient, request)
    if (draw.batchId) ownBatch(tx, user.id, draw.batchId)
    const rows = tx
      .select()
      .from(lots)
      .where(and(eq(lots.ingredientId, ingredientId), gt(lots.remainingMilli, 0)))
      .all()
    const dated = rows.map((lot) => ({ ...lot, remaining: fromMilli(lot.remainingMilli) }))
    const { lines, short } = suggestDraw(dated, draw.quantity, deps.clock.today())
    if (short > 0) {
      const usable = fromMilli(toMilli(draw.quantity) - toMilli(short))
      throw new AppError(
        'not-enough',
        `There is ${quantityWords(usable, ingredient.unit)} of ${ingredient.name} in date. Take less, or pick a lot yourself.`,
        { body: { remaining: usable, unit: ingredient.unit } },
      )
    }
    const made = lines.map(({ lotId, quantity }) => {
      const lot = rows.find((row) => row.id === lotId) as LotRow
      const id = applyMove(deps, tx, user.id, lot, ingredient, { ...request, quantity })
      return moveReply(deps, user, moveRow(tx, id))
    })
    const costMinor = made.reduce((sum, move) => sum + move.costMinor, 0)
    return { moves: made, costMinor, currency: spaceBrief(deps).currency }
  })
}

const UNDO_WORDS: Record<UndoRefusal, string> = {
  opening: 'This put the lot on the shelf. Write it off instead.',
  undone: 'This was undone already.',
  'is-undo': 'This undid something. Draw or top up again instead.',
  'too-late': `A slip can be undone for ${UNDO_MINUTES} minutes. Ask a steward to put it right.`,
}

/**
 * Takes back a slip of one's own by a move of its own; what it put on the tab comes off again.
 * @throws AppError `not-found` for someone else's, `wrong-state` with why not, `not-enough` when what was added is gone
 */
export function undoMove(deps: Deps, user: SignedIn, moveId: string): Move {
  return write(deps.db, (tx) => {
    const { move, lot, undoneBy } = moveRow(tx, moveId)
    if (move.memberId !== user.id) throw notFound('That move')
    const facts = { ...move, undone: undoneBy !== null, undoes: move.undoesId !== null }
    const refusal = undoRefusal(facts, deps.clock.now())
    if (refusal) throw new AppError('wrong-state', UNDO_WORDS[refusal])
    const ingredient = tx.select().from(ingredients).where(eq(ingredients.id, lot.ingredientId)).get()
    const outcome = effectOfUndoing(lot, move)
    if (!outcome.ok) throw notEnough(ingredient as IngredientRow, fromMilli(lot.remainingMilli))
    const id = recordMove(tx, {
      lotId: lot.id,
      lot,
      effect: outcome.effect,
      reason: move.reason,
      memberId: user.id,
      batchId: move.batchId,
      undoesId: move.id,
      at: deps.clock.now(),
    })
    return moveReply(deps, user, moveRow(tx, id))
  })
}
