// Of a study's candidates, the one that stands for it: the refined point where refining has found less.

export function chosenOf<Point, Refined extends Point & { improved: boolean }>(study: {
  best: Point | null
  refined: Refined | null
}): Point | Refined | null {
  return study.refined?.improved ? study.refined : study.best
}
