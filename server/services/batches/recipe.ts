import { eq, inArray } from 'drizzle-orm'
import type { RecipeLineRequest, RecipeRequest } from '#shared/batches/recipe-contract'
import type { RecipeUnit } from '#shared/batches/vocabulary'
import { recipeLines } from '../../db/schema/batches.ts'
import { ingredients } from '../../db/schema/larder.ts'
import type { Tx } from '../../db/open.ts'
import { AppError, invalidField } from '../../errors.ts'
import { newId } from '../../ids.ts'

const UNIT_WORDS: Record<RecipeUnit, string> = { g: 'grams', ml: 'millilitres', each: 'pieces' }

/**
 * Writes a recipe in place of the one that was there.
 * @throws AppError `invalid` for an ingredient the larder does not have, or one that is counted in another unit
 */
export function writeRecipe(tx: Tx, batchId: string, recipe: RecipeRequest) {
  checkIngredients(tx, recipe)
  tx.delete(recipeLines).where(eq(recipeLines.batchId, batchId)).run()
  if (recipe.length === 0) return
  tx.insert(recipeLines)
    .values(
      recipe.map((line, position) => ({
        id: newId(),
        batchId,
        position,
        stage: line.stage,
        ingredientId: line.ingredientId ?? null,
        name: line.name ?? null,
        ...quantityOf(line),
        perBottle: line.perBottle,
        composition: line.composition ?? null,
        allergens: line.allergens ?? [],
      })),
    )
    .run()
}

function quantityOf({ grams, ml, each }: RecipeLineRequest): { unit: RecipeUnit; quantity: number } {
  if (grams !== undefined) return { unit: 'g', quantity: grams }
  if (ml !== undefined) return { unit: 'ml', quantity: ml }
  return { unit: 'each', quantity: each ?? 0 }
}

function checkIngredients(tx: Tx, recipe: RecipeRequest) {
  const ids = [...new Set(recipe.flatMap((line) => line.ingredientId ?? []))]
  if (ids.length === 0) return
  const known = new Map(
    tx
      .select({ id: ingredients.id, name: ingredients.name, unit: ingredients.unit })
      .from(ingredients)
      .where(inArray(ingredients.id, ids))
      .all()
      .map((row) => [row.id, row]),
  )
  const errors = recipe.flatMap((line, place) => {
    if (line.ingredientId === undefined) return []
    const ingredient = known.get(line.ingredientId)
    if (!ingredient)
      return [{ path: `recipe.${place}.ingredientId`, message: 'The larder has no such ingredient.' }]
    const { unit } = quantityOf(line)
    if (unit === ingredient.unit) return []
    const message = `${ingredient.name} is counted in ${UNIT_WORDS[ingredient.unit]}.`
    return [{ path: `recipe.${place}.${unit === 'g' ? 'grams' : unit}`, message }]
  })
  const [first] = errors
  if (errors.length > 1)
    throw new AppError('invalid', 'Some lines of the recipe need another look.', { errors })
  if (first) throw invalidField(first.path, first.message)
}
