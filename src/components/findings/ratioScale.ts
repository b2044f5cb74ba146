/** The scale of ratios: equal steps for equal factors, 1 always on it. */
export interface RatioScale {
  min: number
  max: number
  ticks: number[]
}

const WIDEST = 32

/** Whole doublings that hold every ratio and limit given, at least half to twofold on the side they lie. */
export function ratioScale(values: readonly (number | null)[]): RatioScale {
  const known = values.filter((value): value is number => value !== null && value > 0)
  const least = Math.max(1 / WIDEST, Math.min(1, ...known))
  const most = Math.min(WIDEST, Math.max(2, ...known))
  const low = Math.floor(Math.log2(least) + 1e-9)
  const high = Math.ceil(Math.log2(most) - 1e-9)
  const ticks = Array.from({ length: high - low + 1 }, (_, step) => 2 ** (low + step))
  return { min: 2 ** low, max: 2 ** high, ticks }
}

/** "1 ×", "4 ×", "½ ×". */
export function ratioTick(ratio: number): string {
  if (ratio >= 1) return `${ratio} ×`
  return ratio === 0.5 ? '½ ×' : `1/${1 / ratio} ×`
}
