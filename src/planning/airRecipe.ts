import { Column } from '../physics/column.ts'
import { type ColumnAir } from '../physics/air.ts'
import { ProfileAir } from '../physics/profileAir.ts'
import { type SoundingLevel } from '../physics/sounding.ts'
import { standardAir } from '../physics/standardAtmosphere.ts'
import { BlendedAir } from './blendedAir.ts'

/** What a column of air is made of: plain data that a worker can be sent. */
export type AirRecipe =
  | { kind: 'standard' }
  | { kind: 'profile'; id: string; levels: readonly SoundingLevel[] }
  | { kind: 'between'; earlier: AirRecipe; later: AirRecipe; share: number }
  | { kind: 'legs'; ascent: AirRecipe; descent: AirRecipe }

/** The same key for the same air. */
export function recipeKey(recipe: AirRecipe): string {
  switch (recipe.kind) {
    case 'standard':
      return 'standard'
    case 'profile':
      return recipe.id
    case 'between':
      return `${recipeKey(recipe.earlier)}>${recipe.share}>${recipeKey(recipe.later)}`
    case 'legs':
      return `${recipeKey(recipe.ascent)}/${recipeKey(recipe.descent)}`
  }
}

/** Tabulates the air of a recipe. */
export function columnOf(recipe: AirRecipe): Column {
  if (recipe.kind !== 'legs') return new Column(airOf(recipe))
  return new Column(airOf(recipe.ascent), undefined, columnOf(recipe.descent))
}

function airOf(recipe: AirRecipe): ColumnAir {
  switch (recipe.kind) {
    case 'standard':
      return standardAir
    case 'profile':
      return new ProfileAir(recipe.levels)
    case 'between':
      return new BlendedAir(airOf(recipe.earlier), airOf(recipe.later), recipe.share)
    case 'legs':
      return airOf(recipe.ascent)
  }
}
