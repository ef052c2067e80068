/** Metal parts of the file in SI units. */
import type { Workshop } from './build.js'
import { usual } from './defaults.js'
import type { Metal } from './layout.js'
import { nameText } from './reading.js'
import type { MetalValue } from './schema.js'

export function buildMetal(shop: Workshop, part: MetalValue, at: string): Metal {
  const { unit, paths, lengthText } = shop
  const id = nameText(part.id) ?? ''
  const { grounded } = part
  const assumed = (key: string, value: number | undefined, otherwise: number): number => {
    if (value !== undefined) return value * unit
    shop.ledger.assume(id, `${key} ${lengthText(otherwise)}`)
    return otherwise
  }
  if ('plate' in part) {
    const [one, two] = part.plate
    const corner = ([x, y]: readonly [number, number]) => ({ x: x * unit, y: y * unit })
    const corners = [corner(one), corner(two)] as const
    return { kind: 'plate', id, grounded, corners, height: assumed('height', part.height, usual.bar.height) }
  }
  if ('wall' in part) {
    const path = (paths.get(`${at}.wall`) ?? []).map(({ x, y }) => ({ x, y }))
    return { kind: 'wall', id, grounded, path, from: assumed('from', part.from, 0), to: part.to * unit }
  }
  const path = paths.get(`${at}.path`) ?? []
  const flat = part.height !== undefined || path.some(({ z }) => z === undefined)
  const height = flat ? assumed('height', part.height, usual.bar.height) : usual.bar.height
  const diameter = assumed('diameter', part.diameter, usual.bar.diameter)
  return { kind: 'bar', id, grounded, path, height, diameter }
}
