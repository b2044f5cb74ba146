/** Firings that a kiln's own counter knows of and we do not. */
interface Counter {
  lowest: number | null
  highest: number | null
}

/** Numbers from the lowest to the highest less those that are here; 0 where none was recorded. */
export function missingFirings({ lowest, highest }: Counter, here: number): number {
  if (lowest === null || highest === null) return 0
  return Math.max(0, highest - lowest + 1 - here)
}
