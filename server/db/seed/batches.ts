import { and, asc, eq } from 'drizzle-orm'
import type { RecipeLineRequest } from '#shared/batches/recipe-contract'
import { addDays } from '#shared/time/day'
import { instantOn } from '#shared/time/instant'
import { clockAt } from '../../clock.ts'
import type { Deps } from '../../deps.ts'
import type { SignedIn } from '../../http/sessions.ts'
import { changeBatch, startBatch } from '../../services/batches/book.ts'
import { addBottling, addTasting } from '../../services/batches/bottling.ts'
import { larderNeeds, loadPlan } from '../../services/batches/plan.ts'
import { addReading } from '../../services/batches/readings.ts'
import { tickStep } from '../../services/batches/steps.ts'
import { reserveIngredients } from '../../services/larder/reservations.ts'
import { batches, batchSteps, stepNeeds } from '../schema/batches.ts'
import { ingredients } from '../schema/larder.ts'
import { loans } from '../schema/loans.ts'
import { BOOK, type SeedBatch } from './batches-book.ts'
import type { SeedContext } from './index.ts'

/** The batch book of the demo: written, ticked, read and bottled through the services, each at its own time. */
export function seedBatches(context: SeedContext) {
  const { deps, people } = context
  const zone = deps.clock.timeZone
  const now = deps.clock.now()
  const today = deps.clock.today()
  const at = (day: number, hour: number): Deps => {
    const then = instantOn(addDays(today, day), hour, 0, zone)
    return { ...deps, clock: clockAt(then < now ? then : now, zone) }
  }
  for (const entry of BOOK) {
    const id = people[entry.by]
    if (!id) throw new Error(`the demo has no ${entry.by}`)
    const role = entry.by.startsWith('steward') ? 'steward' : 'member'
    const user: SignedIn = {
      id,
      name: entry.by,
      email: `${entry.by}@barmhouse.example`,
      role,
      status: 'active',
    }
    write(context, at, user, entry)
  }
}

function write(
  context: SeedContext,
  at: (day: number, hour: number) => Deps,
  user: SignedIn,
  entry: SeedBatch,
) {
  const { deps } = context
  const today = deps.clock.today()
  const { id } = startBatch(at(entry.writtenDay, 19), user.id, {
    ...entry.request,
    recipe: entry.recipe.map((line) => lineOf(context, line)),
  })
  if (entry.startDay !== undefined) dateSteps(context, user, id, addDays(today, entry.startDay))
  attachLoans(context, user, id, entry)
  tickSteps(context, at, user, id, entry)
  for (const [day, gravity, temperatureC, tag, ph] of entry.readings) {
    const then = at(day, 18)
    addReading(then, user.id, id, {
      at: then.clock.now(),
      gravity,
      temperatureC,
      ...(tag && { hydrometerItemId: context.items[tag] ?? null }),
      ...(ph !== undefined && { ph }),
    })
  }
  if (entry.bottled) {
    const { day, ...bottled } = entry.bottled
    addBottling(at(day, 15), user.id, id, {
      bottledOn: addDays(today, day),
      bottleKind: 'still-wine',
      bottleMl: 750,
      primer: 'none',
      anyway: false,
      ...bottled,
    })
  }
  if (entry.tasted) {
    const { day, ...tasted } = entry.tasted
    addTasting(at(day, 20), user.id, id, {
      tastedOn: addDays(today, day),
      look: '',
      nose: '',
      taste: '',
      changes: '',
      ...tasted,
    })
  }
  if (entry.ends) changeBatch(at(-2, 20), user, id, versionOf(context, id), { status: entry.ends })
}

function lineOf({ tx }: SeedContext, [name, quantity, more]: SeedBatch['recipe'][number]): RecipeLineRequest {
  const shared = { stage: more?.stage ?? 'must', perBottle: more?.perBottle ?? false } as const
  if (more?.own) {
    const malt = name === 'Barley malt'
    return {
      ...shared,
      name,
      grams: quantity,
      // A mash draws about two thirds of the grain (common practice).
      ...(malt && {
        composition: { waterFraction: 0.04, solubleFraction: 0.62, fermentableFraction: 0.72 },
        allergens: ['cereals-with-gluten'],
      }),
    }
  }
  const row = tx
    .select({ id: ingredients.id, unit: ingredients.unit })
    .from(ingredients)
    .where(eq(ingredients.name, name))
    .get()
  if (!row) throw new Error(`the demo larder has no ${name}`)
  const amount =
    row.unit === 'g' ? { grams: quantity } : row.unit === 'ml' ? { ml: quantity } : { each: quantity }
  return { ...shared, ...amount, ingredientId: row.id }
}

/** Gives the steps their days, as a granted plan would; the kit of the past was booked by hand. */
function dateSteps({ deps, tx }: SeedContext, user: SignedIn, batchId: string, startOn: SeedDay) {
  tx.update(batches).set({ startOn }).where(eq(batches.id, batchId)).run()
  for (const step of tx.select().from(batchSteps).where(eq(batchSteps.batchId, batchId)).all())
    tx.update(batchSteps)
      .set({ plannedOn: addDays(startOn, step.dayOffset) })
      .where(eq(batchSteps.id, step.id))
      .run()
  if (startOn <= deps.clock.today()) return
  const plan = loadPlan(tx, user.id, batchId)
  const days = new Map(plan.facts.steps.map((step) => [step.id, addDays(startOn, step.dayOffset)]))
  reserveIngredients(deps, tx, batchId, larderNeeds(plan, days, startOn))
}

type SeedDay = ReturnType<typeof addDays>

/** Says of loans that were made already which batch, and which step, they are for. */
function attachLoans({ deps, tx, kinds }: SeedContext, user: SignedIn, batchId: string, entry: SeedBatch) {
  for (const [kind, fromDay] of entry.loans ?? []) {
    const kindId = kinds[kind] ?? ''
    const loan = tx
      .select({ id: loans.id })
      .from(loans)
      .where(
        and(
          eq(loans.memberId, user.id),
          eq(loans.kindId, kindId),
          eq(loans.fromOn, addDays(deps.clock.today(), fromDay)),
        ),
      )
      .get()
    if (!loan) throw new Error(`the demo has no loan of a ${kind} for ${entry.request.name}`)
    tx.update(loans).set({ batchId }).where(eq(loans.id, loan.id)).run()
    const need = tx
      .select({ id: stepNeeds.id })
      .from(stepNeeds)
      .innerJoin(batchSteps, eq(batchSteps.id, stepNeeds.stepId))
      .where(and(eq(batchSteps.batchId, batchId), eq(stepNeeds.kindId, kindId)))
      .orderBy(asc(batchSteps.position))
      .get()
    if (need) tx.update(stepNeeds).set({ loanId: loan.id }).where(eq(stepNeeds.id, need.id)).run()
  }
}

function tickSteps(
  { tx }: SeedContext,
  at: (day: number, hour: number) => Deps,
  user: SignedIn,
  batchId: string,
  entry: SeedBatch,
) {
  const steps = tx
    .select()
    .from(batchSteps)
    .where(eq(batchSteps.batchId, batchId))
    .orderBy(asc(batchSteps.position))
    .all()
  const left = [...entry.done]
  const ticked = new Set<string>()
  for (const step of steps) {
    const place = left.indexOf(step.kind)
    if (place < 0) continue
    left.splice(place, 1)
    ticked.add(step.id)
    const then = at((entry.startDay ?? 0) + step.dayOffset, 17)
    const last = left.length === 0 && entry.note
    tickStep(then, user.id, batchId, step.id, { at: then.clock.now(), ...(last && { note: entry.note }) })
  }
  for (const step of entry.moved ? steps.filter(({ id }) => !ticked.has(id)) : [])
    tx.update(batchSteps)
      .set({ plannedOn: step.plannedOn && addDays(step.plannedOn, entry.moved ?? 0) })
      .where(eq(batchSteps.id, step.id))
      .run()
  if (left.length > 0) throw new Error(`${entry.request.name} has no step to ${left[0]}`)
}

const versionOf = ({ tx }: SeedContext, batchId: string) =>
  tx.select({ version: batches.version }).from(batches).where(eq(batches.id, batchId)).get()?.version ?? 1
