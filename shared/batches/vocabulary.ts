export const BATCH_STYLES = ['mead', 'cyser', 'melomel', 'cider', 'wine', 'beer', 'other'] as const
export type BatchStyle = (typeof BATCH_STYLES)[number]

/** `planned` until yeast is in; `conditioning` once the ferment is over; `bottled` while it matures; the last two are ends. */
export const BATCH_STATUSES = [
  'planned',
  'fermenting',
  'conditioning',
  'bottled',
  'finished',
  'abandoned',
] as const
export type BatchStatus = (typeof BATCH_STATUSES)[number]

/** `space`: every member may read it, under its maker's name. */
export const VISIBILITIES = ['private', 'space'] as const
export type Visibility = (typeof VISIBILITIES)[number]

export const STEP_KINDS = [
  'prepare',
  'pitch',
  'feed',
  'rack',
  'fine',
  'chill',
  'bottle',
  'condition',
  'taste',
] as const
export type StepKind = (typeof STEP_KINDS)[number]

/** What is done about chlorine in tap water before anything else goes in. */
export const WATER_TREATMENTS = ['none', 'stand', 'sulphite'] as const
export type WaterTreatment = (typeof WATER_TREATMENTS)[number]

/** When a recipe line goes in; only `must` counts towards the original gravity. */
export const RECIPE_STAGES = ['must', 'feed', 'fining', 'bottling'] as const
export type RecipeStage = (typeof RECIPE_STAGES)[number]

export const RECIPE_UNITS = ['g', 'ml', 'each'] as const
export type RecipeUnit = (typeof RECIPE_UNITS)[number]

export const NITROGEN_DEMANDS = ['low', 'medium', 'high'] as const
export type NitrogenDemand = (typeof NITROGEN_DEMANDS)[number]

export const BOTTLE_KINDS = ['beer', 'sparkling', 'still-wine', 'swing-top', 'pet'] as const
export type BottleKind = (typeof BOTTLE_KINDS)[number]

/** `none`: bottled still. `tablets`: one or more to a bottle, of a mass the pack says. */
export const BATCH_PRIMERS = [
  'none',
  'sucrose',
  'glucose',
  'glucose-monohydrate',
  'dried-malt',
  'honey',
  'tablets',
] as const
export type BatchPrimer = (typeof BATCH_PRIMERS)[number]

/** What a tasting says of brewing it once more. */
export const AGAIN_ANSWERS = ['yes', 'with-changes', 'no'] as const
export type AgainAnswer = (typeof AGAIN_ANSWERS)[number]

/** A trace kept beside a reading. */
export const READING_CHANGES = ['edited', 'deleted'] as const
