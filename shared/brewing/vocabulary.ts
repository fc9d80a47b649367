export const YEAST_FORMS = ['dry', 'liquid', 'slurry'] as const
export type YeastForm = (typeof YEAST_FORMS)[number]

export const STORAGES = ['freezer', 'fridge', 'shelf'] as const
export type Storage = (typeof STORAGES)[number]

export const DRINK_USES = ['wine', 'mead', 'cider', 'ale', 'lager', 'other'] as const
export type DrinkUse = (typeof DRINK_USES)[number]

export const PRIMERS = ['sucrose', 'glucose', 'glucose-monohydrate', 'dried-malt', 'honey'] as const
export type Primer = (typeof PRIMERS)[number]

export const BOTTLES = ['beer', 'sparkling', 'still-wine', 'swing-top', 'pet'] as const
export type Bottle = (typeof BOTTLES)[number]

export const SULPHITE_SALTS = ['potassium', 'sodium'] as const
export type SulphiteSalt = (typeof SULPHITE_SALTS)[number]

export const NITROGEN_DEMANDS = ['low', 'medium', 'high'] as const
export type NitrogenDemand = (typeof NITROGEN_DEMANDS)[number]

/** A gravity already corrected for instrument and temperature. */
export interface GravityReading {
  at: string
  gravity: number
  temperatureC?: number
}
