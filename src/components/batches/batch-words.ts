import type {
  AgainAnswer,
  BatchPrimer,
  BatchStatus,
  BatchStyle,
  BottleKind,
  RecipeStage,
  RecipeUnit,
  StepKind,
  WaterTreatment,
} from '#shared/batches/vocabulary'
import type { IconName } from '@/components/base/icons'
import type { Tone } from '@/components/base/states'

export const STYLE_WORDS: Record<BatchStyle, string> = {
  mead: 'Mead',
  cyser: 'Cyser',
  melomel: 'Melomel',
  cider: 'Cider',
  wine: 'Fruit wine',
  beer: 'Beer',
  other: 'Something else',
}

export const STATUS_WORDS: Record<BatchStatus, { word: string; icon: IconName; tone: Tone }> = {
  planned: { word: 'Planned', icon: 'calendar', tone: 'barm' },
  fermenting: { word: 'Fermenting', icon: 'batch', tone: 'barm' },
  conditioning: { word: 'Clearing', icon: 'wait', tone: 'barm' },
  bottled: { word: 'Bottled', icon: 'bottle', tone: 'sound' },
  finished: { word: 'Drunk up', icon: 'check', tone: 'quiet' },
  abandoned: { word: 'Given up', icon: 'none', tone: 'quiet' },
}

export const STEP_ICONS: Record<StepKind, IconName> = {
  prepare: 'wash',
  pitch: 'yeast',
  feed: 'feed',
  rack: 'rack',
  fine: 'clean',
  chill: 'chill',
  bottle: 'bottle',
  condition: 'wait',
  taste: 'check',
}

export const STEP_WORDS: Record<StepKind, string> = {
  prepare: 'Prepare',
  pitch: 'Pitch',
  feed: 'Feed',
  rack: 'Rack',
  fine: 'Fine',
  chill: 'Chill',
  bottle: 'Bottle',
  condition: 'Condition',
  taste: 'Taste',
}

/** What the button of a step says once it is done. */
export const STEP_DONE_WORDS: Record<StepKind, string> = {
  prepare: 'It’s done',
  pitch: 'It’s pitched',
  feed: 'It’s fed',
  rack: 'It’s racked',
  fine: 'It’s fined',
  chill: 'It’s chilled',
  bottle: 'It’s bottled',
  condition: 'It’s conditioned',
  taste: 'I’ve tasted it',
}

export const BOTTLE_WORDS: Record<BottleKind, string> = {
  'still-wine': 'Still wine, corked',
  sparkling: 'Sparkling wine',
  beer: 'Beer, crown cap',
  'swing-top': 'Swing-top',
  pet: 'PET plastic',
}

export const PRIMER_WORDS: Record<BatchPrimer, string> = {
  none: 'Nothing, bottled still',
  sucrose: 'Table sugar',
  glucose: 'Glucose, dry',
  'glucose-monohydrate': 'Glucose, monohydrate',
  'dried-malt': 'Dried malt',
  honey: 'Honey',
  tablets: 'Sugar tablets',
}

export const STAGE_WORDS: Record<RecipeStage, string> = {
  must: 'In the must',
  feed: 'Yeast food',
  fining: 'To clear',
  bottling: 'To bottle',
}

export const UNIT_WORDS: Record<RecipeUnit, string> = { g: 'g', ml: 'ml', each: 'pieces' }

export const WATER_WORDS: Record<WaterTreatment, string> = {
  none: 'As it comes',
  stand: 'Left standing',
  sulphite: 'With sulphite',
}

export const AGAIN_WORDS: Record<AgainAnswer, string> = {
  yes: 'Yes, as it is',
  'with-changes': 'Yes, with changes',
  no: 'No',
}

/** The options of a field, from words by value. */
export const optionsOf = <V extends string>(words: Record<V, string>) =>
  (Object.entries(words) as [V, string][]).map(([value, label]) => ({ value, label }))

export const sgText = (gravity: number) => gravity.toFixed(3)
export const litresText = (litres: number) => `${Number(litres.toFixed(2))} L`
export const percentText = (percent: number) => `${percent.toFixed(1)}%`
/** A share of the expected drop, in whole per cent. */
export const dropPercent = (drop: number) => Math.round(drop * 100)
