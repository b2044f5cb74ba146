export interface Holder {
  pid: number
  started: string | null
  [fact: string]: unknown
}

export declare class Lock {
  tell(facts: Record<string, unknown>): void
  stillMine(): boolean
  release(): void
}

export declare function readLock(file: string): Holder | null
export declare function writeWhole(file: string, text: string, mode?: number): void
export declare function tryLock(
  file: string,
  facts?: Record<string, unknown>,
): { lock: Lock; holder?: undefined; stale: Holder | null } | { holder: Holder; lock?: undefined }
