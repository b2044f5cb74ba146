/** The functions of the package `cephes` that we use; its own types are not reachable through its exports map. */
declare module 'cephes' {
  /** Resolves when the WebAssembly is ready. */
  export const compiled: Promise<void>
  export function ndtr(x: number): number
  export function ndtri(p: number): number
  export function lgam(x: number): number
  export function incbet(a: number, b: number, x: number): number
  export function incbi(a: number, b: number, p: number): number
  export function bdtr(k: number, n: number, p: number): number
  export function pdtr(k: number, mean: number): number
  export function igamc(a: number, x: number): number
  export function chdtri(df: number, upperTail: number): number
}
