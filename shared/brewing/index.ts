export {
  abv,
  ABV_METHODS,
  attenuation,
  co2BetweenGravities,
  declaredStrength,
  dutyFactor,
  fermentableFloor,
  potentialStrength,
} from './strength.ts'
export type { AbvMethod, Strength } from './strength.ts'
export { airlockSign } from './airlock.ts'
export { bottleCount } from './volumes.ts'
export {
  bottlePressureBar,
  CO2_YIELD,
  co2SolubilityGramsPerLitre,
  primingGrams,
  residualCo2Volumes,
  tabletsPerBottle,
} from './carbonation.ts'
export type { PrimingDose } from './carbonation.ts'
export { bottlingGate, GATE_BLOCKS } from './bottling-gate.ts'
export type { BottlingGate, BottlingGateInput, GateBlock, GateBlockCode } from './bottling-gate.ts'
export {
  brixFromGravity,
  gravityFromBrix,
  gravityFromSugar,
  sucroseDensity,
  sugarGramsPerLitre,
} from './sucrose-density.ts'
export {
  chlorineNeutraliser,
  freeSo2For,
  molecularSo2,
  sulphite,
  SALT_PER_CHLORINE,
  SO2_SHARE,
} from './sulphite.ts'
export { co2Litres, roomCo2 } from './room.ts'
export { correctDryGravity, correctGravity, hydrometerOffset, SIXTY_FAHRENHEIT_C } from './hydrometer.ts'
export { dilute } from './dilution.ts'
export { drySurvival, packetViability } from './vitality.ts'
export type { Factor, PacketFacts, StoragePeriod, Viability } from './vitality.ts'
export { ethanolWaterDensity } from './ethanol-density.ts'
export { honeyGravity, honeyWaterPercent } from './honey.ts'
export { hoursToActivity } from './lag.ts'
export { ingredientForGravity, mustFromIngredients } from './must.ts'
export type { MustLine, MustTotals } from './must.ts'
export { lotBelief, PITCH_OUTCOMES } from './lot-belief.ts'
export type { LotBelief, LotOutcome, LotPrior, PitchOutcome } from './lot-belief.ts'
export { nitrogenFromDap, nitrogenPlan } from './nitrogen.ts'
export type { NitrogenFeed, NitrogenPlan } from './nitrogen.ts'
export { OutOfRange } from './range.ts'
export { pitchAdvice } from './pitch.ts'
export type { PitchAdvice, PitchVerdict, Rehydration } from './pitch.ts'
export { PITCH_VERDICTS } from './judgement.ts'
export { waterDensity } from './water-density.ts'
export * from './vocabulary.ts'
export { FERMENT_STATUSES, fitFermentation } from './forecast.ts'
export type { FermentForecast, FermentInput, FermentStatus } from './forecast.ts'
export { DATASETS, INGREDIENTS, INGREDIENT_GROUPS, mustLine, sugarsFromEquivalents } from './ingredients.ts'
export type { Dataset, IngredientFacts, IngredientGroup } from './ingredients.ts'
export { glassShock } from './glass.ts'
export { SANITISER_AGENTS, sanitiserConditions, sanitiserDilution } from './sanitiser.ts'
export type { SanitiserAgent } from './sanitiser.ts'
