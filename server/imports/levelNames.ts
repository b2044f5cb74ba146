import { factor as factorOf } from '../shared/factors.js'
import { nameKey } from './names.js'

/** A level that the network has. */
export interface KnownLevel {
  uid: string
  factor: string
  /** Name of the studio whose own it is; null: the network's list. */
  studio: string | null
  code: string | null
  name: string
}

/** A level that a sheet names: one of the network's, or (uid null) a new one. */
export interface WantedLevel {
  uid: string | null
  factor: string
  studio: string | null
  name: string
}

const LONGEST = 120
/** Things that stand or meet in one studio; new ones become its own, all other new levels the network's. */
const OF_A_STUDIO = new Set(['rack', 'class'])

/**
 * Finds the levels that a sheet names: the studio's own before the network's, by code or by name
 * whatever its accents and capitals. A name that is nowhere becomes a new level, once.
 */
export class LevelNames {
  readonly wanted: WantedLevel[] = []
  private readonly known = new Map<string, KnownLevel>()
  private readonly places = new Map<string, number>()

  constructor(levels: readonly KnownLevel[]) {
    for (const level of levels) {
      this.known.set(key(level.factor, level.studio, level.name), level)
      if (level.code !== null) this.known.set(key(level.factor, level.studio, level.code), level)
    }
  }

  /** Place in `wanted` of a factor's level, null for one that cannot be (said to `complain`). */
  place(
    factor: string,
    name: string,
    studio: string,
    complain: (message: string) => void,
  ): number | null {
    const own = this.known.get(key(factor, studio, name))
    const found = own ?? this.known.get(key(factor, null, name))
    if (found)
      return this.placeOf({ uid: found.uid, factor, studio: found.studio, name: found.name })
    const entry = factorOf(factor)
    if (!entry?.catalogue) {
      complain(`“${name}” is none of: ${(entry?.fixed ?? []).map((each) => each.name).join(', ')}.`)
      return null
    }
    if (name.length > LONGEST) {
      complain(`At most ${LONGEST} characters.`)
      return null
    }
    return this.placeOf({
      uid: null,
      factor,
      studio: OF_A_STUDIO.has(factor) ? studio : null,
      name,
    })
  }

  private placeOf(level: WantedLevel): number {
    const at = key(level.factor, level.studio, level.name)
    const place = this.places.get(at) ?? this.wanted.length
    if (place === this.wanted.length) {
      this.wanted.push(level)
      this.places.set(at, place)
    }
    return place
  }
}

function key(factor: string, studio: string | null, name: string): string {
  return [factor, studio === null ? '' : nameKey(studio), nameKey(name)].join('\n')
}
