import {
  MOLECULAR_AIM_MG_PER_LITRE,
  SULPHITE_CEILING_MG_PER_LITRE,
  SULPHITE_LABEL_MG_PER_LITRE,
} from './judgement.ts'
import { OutOfRange, oneOf, within } from './range.ts'
import { SULPHITE_SALTS, type SulphiteSalt } from './vocabulary.ts'

const SO2_GRAMS_PER_MOL = 64.064
const CHLORINE_GRAMS_PER_MOL = 70.9
/** K2S2O5 and Na2S2O5, g/mol. Source: IUPAC atomic masses. */
const SALT_GRAMS_PER_MOL: Record<SulphiteSalt, number> = { potassium: 222.32, sodium: 190.1 }

/** SO2 in a gram of metabisulphite: 0.576 of the potassium salt, 0.674 of the sodium salt. Source: stoichiometry. */
export const SO2_SHARE: Record<SulphiteSalt, number> = {
  potassium: (2 * SO2_GRAMS_PER_MOL) / SALT_GRAMS_PER_MOL.potassium,
  sodium: (2 * SO2_GRAMS_PER_MOL) / SALT_GRAMS_PER_MOL.sodium,
}

/** Grams of metabisulphite that undo a gram of chlorine (two Cl2 each): 1.57 and 1.34. Source: stoichiometry. */
export const SALT_PER_CHLORINE: Record<SulphiteSalt, number> = {
  potassium: SALT_GRAMS_PER_MOL.potassium / (2 * CHLORINE_GRAMS_PER_MOL),
  sodium: SALT_GRAMS_PER_MOL.sodium / (2 * CHLORINE_GRAMS_PER_MOL),
}

/**
 * Metabisulphite that takes chlorine or chloramine out of tap water.
 *
 * @param volumeLitres 0.1 to 10,000
 * @param chlorineMgPerLitre as Cl2, free or combined, 0 to 10
 * @param salt `potassium` or `sodium`
 * @returns grams for the whole; milligrams, really: dissolve a weighed pinch or a tablet and divide it
 * @throws RangeError outside those ranges
 * Source: stoichiometry, 1.57 (K) or 1.34 (Na) mg per mg; a waterworks guide doses 10 % more. 5 L at 1 mg/L: 0.008 g.
 * Ascorbic acid is no substitute where chloramine is used (Basu and De Souza 2011).
 */
export function chlorineNeutraliser({
  volumeLitres,
  chlorineMgPerLitre,
  salt,
}: {
  volumeLitres: number
  chlorineMgPerLitre: number
  salt: SulphiteSalt
}): { grams: number; milligrams: number; reasons: string[] } {
  within('volumeLitres', volumeLitres, 0.1, 10_000)
  within('chlorineMgPerLitre', chlorineMgPerLitre, 0, 10)
  const milligrams =
    volumeLitres * chlorineMgPerLitre * SALT_PER_CHLORINE[oneOf('salt', salt, SULPHITE_SALTS)]
  return {
    grams: milligrams / 1000,
    milligrams,
    reasons: [
      'A whole tablet is many times too much for a few litres: dissolve it, and use a measured part.',
      'It works at once on chlorine and chloramine. Chloramine leaves a little ammonium behind, which yeast eats.',
    ],
  }
}

export interface SulphiteDose {
  grams: number
  mgPerLitre: number
  /** Everything in it after the addition, where what was there is known. */
  totalMgPerLitre: number
  mustDeclare: boolean
  warnings: string[]
}

/**
 * Metabisulphite and the SO2 it gives: name one, get both.
 *
 * @param volumeLitres 0.1 to 10,000
 * @param salt `potassium` or `sodium`
 * @param mgPerLitre SO2 to add, 0 to 500; or
 * @param grams of the salt to add, 0 to 10,000
 * @param presentMgPerLitre total SO2 that is there already, 0 to 500; 0 unless said (yeast itself makes 10–30)
 * @returns grams, mg/L added, and what the label then has to say
 * @throws RangeError outside those ranges, or unless exactly one of `mgPerLitre` and `grams` is given
 * Source: stoichiometry. 50 mg/L in 5 L takes 0.434 g of the potassium salt. Only the part that is not bound counts.
 */
export function sulphite({
  volumeLitres,
  salt,
  mgPerLitre,
  grams,
  presentMgPerLitre = 0,
}: {
  volumeLitres: number
  salt: SulphiteSalt
  mgPerLitre?: number
  grams?: number
  presentMgPerLitre?: number
}): SulphiteDose {
  within('volumeLitres', volumeLitres, 0.1, 10_000)
  within('presentMgPerLitre', presentMgPerLitre, 0, 500)
  const share = SO2_SHARE[oneOf('salt', salt, SULPHITE_SALTS)]
  if ((mgPerLitre === undefined) === (grams === undefined)) {
    throw new OutOfRange('mgPerLitre', mgPerLitre, 0, 500, 'give mgPerLitre or grams, one of the two')
  }
  const added =
    mgPerLitre === undefined
      ? (within('grams', grams ?? 0, 0, 10_000) * share * 1000) / volumeLitres
      : within('mgPerLitre', mgPerLitre, 0, 500)
  const total = presentMgPerLitre + added
  const mustDeclare = total > SULPHITE_LABEL_MG_PER_LITRE
  const warnings = ['The dust and fumes can set off asthma: weigh it with the window open.']
  if (mustDeclare) warnings.push('Over 10 mg/L: it must be named as an allergen on the label.')
  if (total > SULPHITE_CEILING_MG_PER_LITRE) {
    warnings.push('Over 200 mg/L, the limit for cider, mead and fruit wine in the EU and UK.')
  }
  return {
    grams: (added * volumeLitres) / 1000 / share,
    mgPerLitre: added,
    totalMgPerLitre: total,
    mustDeclare,
    warnings,
  }
}

const PKA = 1.81

/**
 * The molecular share of free SO2, the part that keeps a drink.
 *
 * @param freeMgPerLitre 0 to 500
 * @param ph 2.5 to 5
 * @returns `mgPerLitre` molecular, and the `fraction` it is of the free
 * @throws RangeError outside those ranges
 * Source: Henderson–Hasselbalch with pKa 1.81 at 20 °C (from memory); alcohol and warmth raise it, so this is low.
 * 40 mg/L free at pH 3.5 gives 0.8.
 */
export function molecularSo2({ freeMgPerLitre, ph }: { freeMgPerLitre: number; ph: number }): {
  mgPerLitre: number
  fraction: number
} {
  within('freeMgPerLitre', freeMgPerLitre, 0, 500)
  const fraction = 1 / (1 + 10 ** (within('ph', ph, 2.5, 5) - PKA))
  return { mgPerLitre: freeMgPerLitre * fraction, fraction }
}

/**
 * Free SO2 that holds an amount of molecular SO2 at a pH.
 *
 * @param ph 2.5 to 5
 * @param molecularMgPerLitre 0 to 5; 0.8 unless said
 * @returns mg/L free
 * @throws RangeError outside those ranges
 * Source: as `molecularSo2`. pH 3.2 needs 20, pH 3.8 needs 79.
 */
export function freeSo2For({
  ph,
  molecularMgPerLitre = MOLECULAR_AIM_MG_PER_LITRE,
}: {
  ph: number
  molecularMgPerLitre?: number
}): { mgPerLitre: number } {
  within('molecularMgPerLitre', molecularMgPerLitre, 0, 5)
  return { mgPerLitre: molecularMgPerLitre * (1 + 10 ** (within('ph', ph, 2.5, 5) - PKA)) }
}
