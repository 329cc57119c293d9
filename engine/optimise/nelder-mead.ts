// Downhill simplex search for a few continuous variables where no derivative is to be had.
//
// J. A. Nelder, R. Mead, "A simplex method for function minimization", Comput. J. 7 (1965) 308-313, with the usual
// coefficients (reflection 1, expansion 2, contraction 1/2, shrink 1/2). A value may be +Infinity: such a corner is
// only ever worse. An own implementation: the one published in fmin 0.0.4 assigns to an undeclared variable where the
// simplex shrinks, which throws in strict code; it serves as the cross-check in the test.

export interface SimplexOptions {
  /** First step in each variable. */
  steps: readonly number[]
  /** Ends when the simplex is narrower than this in every variable … */
  tolerance?: number
  /** … and its values differ by less than this, relative. */
  valueTolerance?: number
  maxEvaluations?: number
}

export interface SimplexResult {
  x: number[]
  value: number
  evaluations: number
  /** False when the evaluations ran out first. */
  converged: boolean
  /** How often each kind of move was made. */
  moves: { reflect: number; expand: number; contractOutside: number; contractInside: number; shrink: number }
}

export function nelderMead(
  f: (x: readonly number[]) => number,
  start: readonly number[],
  options: SimplexOptions,
): SimplexResult {
  const n = start.length
  const tolerance = options.tolerance ?? 1e-8
  const valueTolerance = options.valueTolerance ?? 1e-12
  const maxEvaluations = options.maxEvaluations ?? 400 * n
  const moves = { reflect: 0, expand: 0, contractOutside: 0, contractInside: 0, shrink: 0 }
  let evaluations = 0
  const at = (x: number[]) => {
    evaluations++
    const value = f(x)
    return { x, value: Number.isNaN(value) ? Number.POSITIVE_INFINITY : value }
  }

  let corners = [at([...start])]
  for (let j = 0; j < n; j++) {
    const x = [...start]
    x[j] += options.steps[j]
    corners.push(at(x))
  }

  const narrow = () => {
    const [best] = corners
    const width = Math.max(
      ...corners.map((corner) => Math.max(...corner.x.map((xj, j) => Math.abs(xj - best.x[j])))),
    )
    const spread = Math.abs(corners[n].value - best.value)
    return width <= tolerance && !(spread > valueTolerance * Math.max(1, Math.abs(best.value)))
  }

  let converged = false
  for (;;) {
    // A stable sort keeps ties in order of age, so that the path is the same everywhere.
    corners.sort((a, b) => a.value - b.value)
    if (narrow()) {
      converged = true
      break
    }
    if (evaluations >= maxEvaluations) break
    const worst = corners[n]
    const centre = Array.from({ length: n }, (_, j) => {
      let sum = 0
      for (let k = 0; k < n; k++) sum += corners[k].x[j]
      return sum / n
    })
    const along = (t: number) => at(centre.map((c, j) => c + t * (worst.x[j] - c)))

    const reflected = along(-1)
    if (reflected.value < corners[0].value) {
      const expanded = along(-2)
      if (expanded.value < reflected.value) {
        corners[n] = expanded
        moves.expand++
      } else {
        corners[n] = reflected
        moves.reflect++
      }
      continue
    }
    if (reflected.value < corners[n - 1].value) {
      corners[n] = reflected
      moves.reflect++
      continue
    }
    if (reflected.value < worst.value) {
      const outside = along(-0.5)
      if (outside.value <= reflected.value) {
        corners[n] = outside
        moves.contractOutside++
        continue
      }
    } else {
      const inside = along(0.5)
      if (inside.value < worst.value) {
        corners[n] = inside
        moves.contractInside++
        continue
      }
    }
    const [best] = corners
    corners = [
      best,
      ...corners.slice(1).map(({ x }) => at(x.map((xj, j) => best.x[j] + 0.5 * (xj - best.x[j])))),
    ]
    moves.shrink++
  }
  return { x: corners[0].x, value: corners[0].value, evaluations, converged, moves }
}
