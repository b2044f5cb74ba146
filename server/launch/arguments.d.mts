export declare const KINDS: string[]

export declare function readTestArguments(args: string[]): {
  kinds: string[]
  keep: string | null
  extra: string[]
}
