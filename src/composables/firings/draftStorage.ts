/** Drafts on this device: what was typed at the kiln survives a reload, a closed tab and an ended session. */
interface Kept<T> {
  at: string
  draft: T
}

/** Drafts belong to one person, in one network, about one thing. */
export function draftKey(user: string, network: string, about: string): string {
  return `duntless.draft.${user}.${network}.${about}`
}

/** A kept draft of this form (`v`), or null. What cannot be read counts as none. */
export function readDraft<T extends { v: number }>(key: string, v: number): Kept<T> | null {
  try {
    const kept = JSON.parse(localStorage.getItem(key) ?? 'null') as Kept<T> | null
    return kept?.draft?.v === v ? kept : null
  } catch {
    return null
  }
}

/** True when it is kept; storage may be forbidden or full, and the page must then say so. */
export function keepDraft<T>(key: string, draft: T): boolean {
  try {
    localStorage.setItem(
      key,
      JSON.stringify({ at: new Date().toISOString(), draft } satisfies Kept<T>),
    )
    return true
  } catch {
    return false
  }
}

export function dropDraft(key: string): void {
  try {
    localStorage.removeItem(key)
  } catch {
    // Nothing could be kept, so there is nothing to take away.
  }
}
