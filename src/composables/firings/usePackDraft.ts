import { computed, ref, watch } from 'vue'
import { v7 as makeUid } from 'uuid'
import type { Catalogue } from '../../../server/contract/catalogue.js'
import type { FiringDetail } from '../../../server/contract/firings.js'
import { localTime } from '../../../server/shared/zonedTime.js'
import { dropDraft, keepDraft, readDraft } from './draftStorage'
import type { PackDraft, PackLot } from './packDraft'
import {
  asLastTime,
  classLevelOf,
  duplicateOf,
  emptyLot,
  emptyPack,
  fitToStudio,
  packOf,
} from './packDraft'

interface Options {
  values: PackDraft
  reset: (draft: PackDraft) => void
  catalogue: () => Catalogue | undefined
  kiln: () => string | undefined
  kind: () => string | undefined
}

/** A load while it is packed: kept on this device, filled from what is known, its lots added, doubled and taken away. */
export function usePackDraft({
  values,
  reset,
  catalogue,
  kiln: lastKiln,
  kind: lastKind,
}: Options) {
  const kept = ref(true)
  /** When what is shown was begun, where it was taken up again. */
  const takenUp = ref<string | null>(null)
  /** The lot whose fields are open. */
  const open = ref<string | null>(null)
  /** What was filled in by us, and follows kiln and day until a person says otherwise. */
  const filled = { localDate: null as string | null, kilnNumber: null as number | null }
  let key = ''
  /** The load as it was begun: nothing is kept until a person changes it. */
  let start = ''
  let corrected: FiringDetail | null = null

  const kilns = computed(() => {
    const all = catalogue()
    const packs = new Set(
      all?.studios.filter(({ abilities }) => abilities['firings.pack']).map(({ uid }) => uid),
    )
    return (all?.kilns ?? []).filter(
      (each) => packs.has(each.studio) && (!each.archived || each.uid === values.kiln),
    )
  })
  const kiln = computed(() => kilns.value.find(({ uid }) => uid === values.kiln) ?? null)
  const studio = computed(
    () => catalogue()?.studios.find(({ uid }) => uid === kiln.value?.studio) ?? null,
  )

  /** Takes up what was kept under this key, or begins anew (from a firing, to correct its load). */
  function begin(storageKey: string, firing: FiringDetail | null): void {
    key = storageKey
    corrected = firing
    filled.localDate = null
    filled.kilnNumber = null
    const before = readDraft<PackDraft>(key, 1)
    // A kept correction of a load that has changed since would undo that change.
    const usable = before && (!firing || before.draft.base === firing.revision) ? before : null
    takenUp.value = usable?.at ?? null
    reset(usable?.draft ?? (firing ? packOf(firing, makeUid) : fresh()))
    start = JSON.stringify(usable ? null : values)
    open.value = null
  }

  function fresh(): PackDraft {
    const usual =
      kilns.value.find(({ uid }) => uid === lastKiln()) ??
      (kilns.value.length === 1 ? kilns.value[0] : undefined)
    const draft = { ...emptyPack(makeUid), kiln: usual?.uid ?? null }
    const kind = lastKind()
    return fill(kind ? { ...draft, kind: kind as PackDraft['kind'] } : draft)
  }

  /** Today in the kiln's studio, and the next number of the kiln's own counter. */
  function fill(draft: PackDraft): PackDraft {
    const mine = kilns.value.find(({ uid }) => uid === draft.kiln)
    const zone = catalogue()?.studios.find(({ uid }) => uid === mine?.studio)?.timeZone
    const localDate =
      draft.localDate === filled.localDate
        ? zone
          ? localTime(new Date(), zone).day
          : null
        : draft.localDate
    const kilnNumber =
      draft.kilnNumber === filled.kilnNumber ? (mine?.nextNumber ?? null) : draft.kilnNumber
    filled.localDate = localDate
    filled.kilnNumber = kilnNumber
    return { ...draft, localDate, kilnNumber }
  }

  function startAfresh(): void {
    dropDraft(key)
    takenUp.value = null
    filled.localDate = null
    filled.kilnNumber = null
    reset(corrected ? packOf(corrected, makeUid) : fresh())
    start = JSON.stringify(values)
    open.value = null
  }

  /** Day and number follow the kiln while they are ours; levels of another studio are let go. */
  function chooseKiln(uid: string | null): void {
    values.kiln = uid
    const all = catalogue()
    if (all && values.base === 0)
      Object.assign(values, fitToStudio(fill(values), all, studio.value?.uid ?? null))
  }

  function chooseKind(kind: PackDraft['kind']): void {
    values.kind = kind
    const programme = catalogue()?.levels.find(({ uid }) => uid === values.programme)
    if (programme?.attributes.kind && programme.attributes.kind !== kind) values.programme = null
  }

  /** A programme brings its cone. */
  function chooseProgramme(uid: string | null): void {
    values.programme = uid
    values.cone =
      catalogue()?.levels.find((level) => level.uid === uid)?.attributes.cone ?? values.cone
  }

  watch(
    values,
    () => {
      if (key && JSON.stringify(values) !== start) kept.value = keepDraft(key, values)
    },
    { deep: true },
  )

  function addLot(): void {
    const lot = emptyLot(makeUid)
    values.lots.push(lot)
    open.value = lot.uid
  }

  function duplicate(uid: string | null): void {
    const at = values.lots.findIndex((lot) => lot.uid === uid)
    const lot = values.lots[at]
    if (!lot) return
    const copy = duplicateOf(lot, makeUid)
    values.lots.splice(at + 1, 0, copy)
    open.value = copy.uid
  }

  /** Takes a lot away; what it gives back puts it there again, with what was turned away of it. */
  function remove(uid: string | null): (() => void) | null {
    const at = values.lots.findIndex((lot) => lot.uid === uid)
    const lot = values.lots[at]
    if (!lot) return null
    const away = values.turnedAway.filter((each) => each.lot === uid)
    values.turnedAway = values.turnedAway.filter((each) => each.lot !== uid)
    values.lots.splice(at, 1)
    open.value = values.lots[Math.min(at, values.lots.length - 1)]?.uid ?? null
    return () => {
      values.lots.splice(at, 0, lot)
      values.turnedAway.push(...away)
      open.value = lot.uid
    }
  }

  /** A level of a lot; a class brings the level of its makers with it. */
  function setLevel(lot: PackLot, factor: string, value: string | string[] | null): void {
    lot.levels[factor] = value
    const all = catalogue()
    if (factor === 'class' && all && !Array.isArray(value))
      lot.levels.class_level = classLevelOf(all, value) ?? lot.levels.class_level ?? null
  }

  function copyLast(last: FiringDetail): void {
    Object.assign(values, asLastTime(values, last, makeUid))
    open.value = null
  }

  function addAway(): void {
    values.turnedAway.push({
      uid: makeUid(),
      lot: open.value ?? values.rest,
      fault: null,
      pieces: 1,
    })
  }

  /** It arrived, or is given up: nothing is left to keep. */
  function drop(): void {
    dropDraft(key)
    key = ''
  }

  return {
    kept,
    takenUp,
    open,
    kilns,
    kiln,
    studio,
    begin,
    startAfresh,
    chooseKiln,
    chooseKind,
    chooseProgramme,
    addLot,
    duplicate,
    remove,
    setLevel,
    copyLast,
    addAway,
    drop,
  }
}
