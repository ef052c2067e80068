/** Parts of a layout by their ids. */
import type { Layout, Supply } from './layout.js'

/** Throws on an id that the layout does not have: parsing has checked all of them. */
export function supplyOf({ supplies }: Pick<Layout, 'supplies'>, id: string): Supply {
  const supply = supplies.find((one) => one.id === id)
  if (!supply) throw new Error(`the layout names no supply ${id}`)
  return supply
}
