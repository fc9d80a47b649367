import { z } from 'zod'
import { Id, line, numberIn } from '../http/fields.ts'
import { Composition } from '../larder/contract.ts'
import { ALLERGENS, INGREDIENT_KINDS } from '../larder/vocabulary.ts'
import { RECIPE_STAGES, RECIPE_UNITS } from './vocabulary.ts'

const Quantity = z.number().gt(0).max(1_000_000)

/** A line of the larder by its id, or one's own by name; a quantity in exactly one unit. */
export const RecipeLineRequest = z
  .strictObject({
    ingredientId: Id.optional(),
    name: line(80).optional(),
    stage: z.enum(RECIPE_STAGES).default('must'),
    grams: Quantity.optional(),
    ml: Quantity.optional(),
    each: Quantity.optional(),
    /** So many for each bottle: a cap, a cork. */
    perBottle: z.boolean().default(false),
    composition: Composition.nullish(),
    allergens: z.array(z.enum(ALLERGENS)).max(ALLERGENS.length).optional(),
  })
  .refine((of) => (of.ingredientId === undefined) !== (of.name === undefined), {
    path: ['ingredientId'],
    message: 'Choose something from the larder, or name your own.',
  })
  .refine((of) => [of.grams, of.ml, of.each].filter((quantity) => quantity !== undefined).length === 1, {
    path: ['grams'],
    message: 'Say how much, in one unit.',
  })
  .refine((of) => of.ingredientId === undefined || (of.composition == null && of.allergens === undefined), {
    path: ['composition'],
    message: 'What a larder ingredient is made of stands in the larder.',
  })
  .refine((of) => !of.perBottle || of.stage === 'bottling', {
    path: ['perBottle'],
    message: 'Only things for bottling are counted by the bottle.',
  })
export type RecipeLineRequest = z.output<typeof RecipeLineRequest>

export const RecipeRequest = z.array(RecipeLineRequest).max(60)
export type RecipeRequest = z.output<typeof RecipeRequest>

export const RecipeLineReply = z.object({
  id: Id,
  ingredientId: Id.nullable(),
  name: z.string(),
  /** Of the larder; null for one's own. */
  kind: z.enum(INGREDIENT_KINDS).nullable(),
  stage: z.enum(RECIPE_STAGES),
  unit: z.enum(RECIPE_UNITS),
  quantity: numberIn(0, 1_000_000),
  grams: z.number().optional(),
  ml: z.number().optional(),
  each: z.number().optional(),
  perBottle: z.boolean(),
  composition: z
    .object({
      waterFraction: z.number(),
      solubleFraction: z.number(),
      fermentableFraction: z.number().optional(),
      yanMgPerKg: z.number().optional(),
    })
    .nullable(),
  gramsPerUnit: z.number().nullable(),
  allergens: z.array(z.enum(ALLERGENS)),
})
export type RecipeLineReply = z.output<typeof RecipeLineReply>
