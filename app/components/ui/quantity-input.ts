// A quantity as typed on a page: a bare number means the unit shown beside the box, another unit may be typed after it.
import {
  type Dimension,
  type DisplayHint,
  fromDisplay,
  type Parsed,
  parseQuantity,
  type UnitSystem,
} from '#engine/units.ts'

/** SI value of typed text, or what is wrong with it. */
export function readQuantity(
  text: string,
  dimension: Dimension,
  units: UnitSystem,
  hint?: DisplayHint,
): Parsed {
  const bare = parseQuantity(text, 'none')
  return bare.ok
    ? { ok: true, value: fromDisplay(bare.value, dimension, units, hint) }
    : parseQuantity(text, dimension)
}
