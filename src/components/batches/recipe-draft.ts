import type { RecipeLineReply, RecipeLineRequest } from '#shared/batches/recipe-contract'
import type { LineComposition, RecipeLine } from '#shared/batches/recipe'
import type { RecipeStage, RecipeUnit } from '#shared/batches/vocabulary'
import type { Allergen, IngredientKind } from '#shared/larder/vocabulary'

/** An ingredient a recipe can take, as the larder gives it. */
export interface LarderChoice {
  id: string
  name: string
  kind: IngredientKind
  unit: RecipeUnit
  composition: LineComposition | null
  gramsPerUnit: number | null
}

/** A line while it is written: the quantity may be missing still. */
export interface LineDraft {
  key: string
  ingredientId: string | undefined
  name: string
  stage: RecipeStage
  unit: RecipeUnit
  quantity: number | undefined
  perBottle: boolean
  composition: LineComposition | null
  gramsPerUnit: number | null
  allergens: Allergen[]
}

let made = 0
const newKey = () => `line-${(made += 1)}`

const STAGE_OF_KIND: Partial<Record<IngredientKind, RecipeStage>> = {
  nutrient: 'feed',
  fining: 'fining',
  preservative: 'bottling',
  priming: 'bottling',
  closure: 'bottling',
  bottle: 'bottling',
  label: 'bottling',
}

/** A fresh line: of the larder, or one's own. */
export function draftOf(choice: LarderChoice | undefined): LineDraft {
  const counted = choice?.kind === 'closure' || choice?.kind === 'bottle' || choice?.kind === 'label'
  return {
    key: newKey(),
    ingredientId: choice?.id,
    name: choice?.name ?? '',
    stage: (choice && STAGE_OF_KIND[choice.kind]) ?? 'must',
    unit: choice?.unit ?? 'g',
    quantity: counted ? 1 : undefined,
    perBottle: counted,
    composition: choice?.composition ?? null,
    gramsPerUnit: choice?.gramsPerUnit ?? null,
    allergens: [],
  }
}

export const draftOfReply = (line: RecipeLineReply): LineDraft => ({
  key: newKey(),
  ingredientId: line.ingredientId ?? undefined,
  name: line.name,
  stage: line.stage,
  unit: line.unit,
  quantity: line.quantity,
  perBottle: line.perBottle,
  composition: line.composition,
  gramsPerUnit: line.gramsPerUnit,
  allergens: line.ingredientId ? [] : line.allergens,
})

/** The lines that can be added up already. */
export const asRecipeLines = (drafts: readonly LineDraft[]): RecipeLine[] =>
  drafts.flatMap((draft) =>
    draft.quantity !== undefined && draft.quantity > 0 ? [{ ...draft, quantity: draft.quantity }] : [],
  )

export function asRequestLine(draft: LineDraft): RecipeLineRequest {
  const amount = draft.quantity ?? 0
  const quantity =
    draft.unit === 'g' ? { grams: amount } : draft.unit === 'ml' ? { ml: amount } : { each: amount }
  return {
    ...(draft.ingredientId
      ? { ingredientId: draft.ingredientId }
      : { name: draft.name, allergens: draft.allergens }),
    ...quantity,
    stage: draft.stage,
    perBottle: draft.perBottle,
    ...(!draft.ingredientId &&
      draft.composition && { composition: { fermentableFraction: 1, ...draft.composition } }),
  }
}
