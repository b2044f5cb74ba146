/** Levels of factors as the place where a fault shows: "on ware of porcelain", "in kiln 2". */
import { factor as factorOf } from '../factors.js'

/** "Slip only" in mid-sentence; "BM7" and "K2 body" stay as they are. */
function lowerFirst(name: string): string {
  return /^\p{Lu}\p{Ll}/u.test(name) ? name.charAt(0).toLowerCase() + name.slice(1) : name
}

/** Names that follow a verb as they stand: "under plastic", "slowly". */
const READS_ON =
  /^(above|at|behind|below|beneath|beside|between|by|for|from|in|inside|near|on|outside|over|under|upside|with|without|slow|slowly|fast|overnight|twice|once)\b/i

/** A practice after its verb: bare where it reads on, else in quotation marks. */
function done(name: string): string {
  return READS_ON.test(name) || /ly\b/.test(name.split(' ')[0] ?? '')
    ? lowerFirst(name)
    : `“${lowerFirst(name)}”`
}

function named(kind: string, name: string): string {
  return new RegExp(`\\b${kind}`, 'i').test(name) ? name : `${kind} ${name}`
}

const GLAZED: Readonly<Record<string, string>> = {
  'both sides': 'on ware glazed on both sides',
  'no glaze': 'on ware without glaze',
}

const FORMED: Readonly<Record<string, string>> = {
  mixed: 'on ware made in more than one way',
}

const COOLED: Readonly<Record<string, string>> = {
  closed: 'in firings cooled with the kiln closed',
  'programmed hold': 'in firings cooled with a programmed hold',
  'vents open': 'in firings cooled with the vents open',
  'lid or door propped': 'in firings cooled with the lid or door propped',
  fan: 'in firings cooled with a fan',
}

const PHRASES: Readonly<Record<string, (level: string) => string>> = {
  form: (level) => `on ${lowerFirst(level)}`,
  clay_body: (level) => `on ware of ${lowerFirst(level)}`,
  clay_condition: (level) => `on ware of ${lowerFirst(level)} clay`,
  glaze: (level) => `on ware glazed with ${lowerFirst(level)}`,
  glaze_sides: (level) => GLAZED[level] ?? `on ware glazed ${lowerFirst(level)}`,
  forming: (level) =>
    FORMED[level] ??
    (/\s/.test(level) ? `on ware formed ${done(level)}` : `on ${lowerFirst(level)} ware`),
  drying_practice: (level) => `on ware dried ${done(level)}`,
  joining_practice: (level) => `on ware joined ${done(level)}`,
  glazing_practice: (level) => `on ware glazed ${done(level)}`,
  thickness_band: (level) => `on ware ${lowerFirst(level)} thick`,
  size_band: (level) => `on ware ${lowerFirst(level)} in size`,
  rack: (level) => `on ware dried at “${level}”`,
  days_dried: (level) => `on ware dried for ${lowerFirst(level)}`,
  shelf: (level) =>
    `on the ${named('shelf', lowerFirst(level)).replace(/^shelf (.*)$/, '$1 shelf')}`,
  class: (level) => `on ware from ${named('class', `“${level}”`)}`,
  class_level: (level) => `on ware of the class level “${lowerFirst(level)}”`,
  kiln: (level) => `in ${named('kiln', level)}`,
  programme: (level) => `in firings on ${named('programme', level)}`,
  cooling: (level) => COOLED[level] ?? `in firings cooled ${done(level)}`,
  opening_temperature: (level) =>
    `in firings opened ${/^(under|over|above|below)\b/.test(level) ? level : `at ${level}`}`,
}

/** Where a fault shows: the level of a factor as a phrase that follows "show 2.2 times as often". */
export function levelPhrase(factor: string, level: string): string {
  const phrase = PHRASES[factor]
  if (phrase) return phrase(level)
  return `on ware with ${(factorOf(factor)?.name ?? factor).toLowerCase()} “${level}”`
}

/** The same for a pair of glaze and clay body. */
export function pairPhrase(glaze: string, clay: string): string {
  return `on ware of ${lowerFirst(clay)} glazed with ${lowerFirst(glaze)}`
}

/** Factors whose levels have a phrase of their own. */
export function hasLevelPhrase(factor: string): boolean {
  return factor in PHRASES
}
