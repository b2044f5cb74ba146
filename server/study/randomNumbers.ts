/** Random numbers in [0, 1) from a seed, the same on every machine (Jenkins' small fast generator, 32 bits). */
export function randomNumbers(seed: number): () => number {
  let a = 0xf1ea5eed
  let b = seed | 0
  let c = b
  let d = b
  const next = (): number => {
    const e = (a - ((b << 27) | (b >>> 5))) | 0
    a = b ^ ((c << 17) | (c >>> 15))
    b = (c + d) | 0
    c = (d + e) | 0
    d = (e + a) | 0
    return (d >>> 0) / 4294967296
  }
  for (let i = 0; i < 20; i += 1) next()
  return next
}

/** A seed for one comparison: its own draws, whatever else is compared (FNV-1a). */
export function seedOf(seed: number, ...names: readonly string[]): number {
  let hash = 0x811c9dc5 ^ seed
  for (const name of names) {
    for (let i = 0; i < name.length; i += 1) hash = Math.imul(hash ^ name.charCodeAt(i), 0x01000193)
    hash = Math.imul(hash ^ 0xff, 0x01000193)
  }
  return hash | 0
}
