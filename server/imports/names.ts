/** Letters that the database's collation takes for two plain ones, beside those that NFKD splits. */
const PAIRS: Readonly<Record<string, string>> = {
  ß: 'ss',
  æ: 'ae',
  œ: 'oe',
  ø: 'o',
  ł: 'l',
  đ: 'd',
}

/** A name as it is compared: "Café  Blue" is "cafe blue", as in the database (utf8mb4_unicode_ci). */
export function nameKey(name: string): string {
  return name
    .normalize('NFKD')
    .replace(/\p{M}/gu, '')
    .toLowerCase()
    .replace(/[ßæœøłđ]/g, (letter) => PAIRS[letter] ?? letter)
    .replace(/\s+/g, ' ')
    .trim()
}
