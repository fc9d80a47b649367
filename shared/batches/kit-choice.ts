import type { KindCategory } from '../kit/vocabulary.ts'
import type { KitRole } from './plan-template.ts'
import type { BottleKind } from './vocabulary.ts'

/** What the choice looks at of a kind on the shelf. */
export interface ChoosableKind {
  id: string
  name: string
  category: KindCategory
  capacityLitres: number | null
  /** Set for instruments marked for a temperature: hydrometers. */
  markedForTemperatureC: number | null
  wildOnly: boolean
}

export interface KitWish {
  volumeLitres: number
  wild: boolean
  bottleKind: BottleKind
}

/**
 * The kind of the shelf that would do for a role, or undefined when there is none: the smallest vessel that holds the
 * volume, an instrument that is marked for a temperature, a capper or a corker by the bottle. A first guess; members
 * choose another where they know better.
 */
export function chooseKind(
  role: KitRole,
  kinds: readonly ChoosableKind[],
  wish: KitWish,
): ChoosableKind | undefined {
  const tame = kinds.filter((kind) => !kind.wildOnly)
  // Kinds kept for wild cultures first; an ordinary kind may have items that are.
  const pool = wish.wild ? [...kinds.filter((kind) => kind.wildOnly), ...tame] : tame
  const named = (category: KindCategory, word: RegExp) =>
    pool.find((kind) => kind.category === category && word.test(kind.name))
  switch (role) {
    case 'fermenter':
      return vessels(pool, wish.volumeLitres)[0]
    case 'second-vessel':
      return vessels(pool, wish.volumeLitres)[1] ?? vessels(pool, wish.volumeLitres)[0]
    case 'hydrometer':
      return pool
        .filter((kind) => kind.category === 'instrument' && kind.markedForTemperatureC !== null)
        .sort(byMark)[0]
    case 'siphon':
      return named('transfer', /siphon/i) ?? pool.find((kind) => kind.category === 'transfer')
    case 'closer':
      return closer(wish.bottleKind, named)
    case 'heater':
      return pool
        .filter(
          (kind) => kind.category === 'heating' && (kind.capacityLitres ?? Infinity) >= wish.volumeLitres,
        )
        .sort(bySize)[0]
  }
}

/** Vessels that hold the volume, smallest first; a little short of the brim counts as full. */
function vessels(kinds: readonly ChoosableKind[], volumeLitres: number): ChoosableKind[] {
  return kinds
    .filter(
      (kind) =>
        kind.category === 'vessel' &&
        kind.capacityLitres !== null &&
        kind.capacityLitres >= volumeLitres * 0.999,
    )
    .sort(bySize)
}

/** Swing-tops and PET close by hand. */
function closer(
  bottle: BottleKind,
  named: (category: KindCategory, word: RegExp) => ChoosableKind | undefined,
): ChoosableKind | undefined {
  switch (bottle) {
    case 'still-wine':
      return named('closure', /cork/i)
    case 'beer':
    case 'sparkling':
      return named('closure', /capper|crown/i)
    case 'swing-top':
    case 'pet':
      return undefined
  }
}

/** Marked for 20 °C first: that is what most people read at. */
const byMark = (a: ChoosableKind, b: ChoosableKind) =>
  Math.abs((a.markedForTemperatureC ?? 20) - 20) - Math.abs((b.markedForTemperatureC ?? 20) - 20)

/** By capacity; the sort is stable, so of equal ones those for wild cultures stay in front. */
const bySize = (a: ChoosableKind, b: ChoosableKind) =>
  (a.capacityLitres ?? Infinity) - (b.capacityLitres ?? Infinity)
