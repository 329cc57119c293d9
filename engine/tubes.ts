/** Standard tube sizes that a study may name. */

/** A tube size [m] and its wall's Birmingham wire gauge. */
export type TubeSize = { id: string; outsideDiameter: number; wallThickness: number; gauge: number }

/** Where the sizes come from. */
export const tubeCatalogueSource =
  'Standard exchanger tubing, outside diameter and Birmingham wire gauge wall as listed in the TEMA Standards (sizes seen in a public copy)'

/** Wall thickness [mm] of each Birmingham wire gauge. */
const walls: Readonly<Record<number, number>> = {
  10: 3.404,
  12: 2.769,
  14: 2.108,
  16: 1.651,
  18: 1.245,
  20: 0.889,
  22: 0.711,
}

/** Outside diameters [mm] and the gauges each is drawn in. */
const sizes: readonly [number, readonly number[]][] = [
  [9.525, [22, 20, 18]],
  [12.7, [20, 18]],
  [15.875, [20, 18, 16]],
  [19.05, [20, 18, 16, 14, 12]],
  [22.225, [20, 18, 16, 14]],
  [25.4, [18, 16, 14, 12]],
  [31.75, [16, 14, 12, 10]],
]

/** Millimetres as metres without a binary remainder: 19.05 becomes 0.01905. */
const metres = (millimetres: number) => Number(`${millimetres}e-3`)

export const tubeCatalogue: readonly TubeSize[] = sizes.flatMap(([diameter, gauges]) =>
  gauges.map((gauge) => ({
    id: `${diameter}x${walls[gauge]}`,
    outsideDiameter: metres(diameter),
    wallThickness: metres(walls[gauge]),
    gauge,
  })),
)

/** The catalogue size with this id, e.g. "19.05x1.651". */
export function findTube(id: string): TubeSize | undefined {
  return tubeCatalogue.find((size) => size.id === id)
}

/** Tube lengths [m] sold as standard; nothing in the engine is bound to them. */
export const standardTubeLengths: readonly number[] = [2.438, 3.048, 3.658, 4.877, 6.096]
