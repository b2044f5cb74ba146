/** Codes of names in order of first appearance; 0 is "not recorded". */
export class Dictionary {
  private readonly codes = new Map<string, number>()
  readonly names: string[] = []

  /** The code of a name, from 1. */
  code(name: string): number {
    let code = this.codes.get(name)
    if (code === undefined) {
      this.names.push(name)
      code = this.names.length
      this.codes.set(name, code)
    }
    return code
  }

  /** Names by code unit and, for every old code, its place (from 1) in that order; index 0 stays 0. */
  sorted(): { names: string[]; remap: Uint32Array } {
    const order = this.names.map((_, index) => index)
    order.sort((i, j) => compareText(this.names[i] as string, this.names[j] as string))
    const remap = new Uint32Array(this.names.length + 1)
    order.forEach((old, place) => {
      remap[old + 1] = place + 1
    })
    return { names: order.map((index) => this.names[index] as string), remap }
  }
}

/** By code unit: the same on every machine. */
export function compareText(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0
}

export type Codes = Uint16Array | Uint32Array

/**
 * A growing column of codes: two bytes a row until a code needs four. Fourteen factors of 1.5 million lots take
 * 42 MB this way, 180 MB as JavaScript arrays.
 */
export class CodeColumn {
  private values: Codes = new Uint16Array(64)
  length = 0

  push(code: number): void {
    if (this.length === this.values.length) this.values = grown(this.values)
    if (code > 0xffff && this.values instanceof Uint16Array)
      this.values = Uint32Array.from(this.values)
    this.values[this.length] = code
    this.length += 1
  }

  get(index: number): number {
    return this.values[index] as number
  }

  /** The codes in a new order, renamed. */
  arranged(order: Int32Array, remap: Uint32Array): Codes {
    const out =
      remap.length > 0x10000 ? new Uint32Array(order.length) : new Uint16Array(order.length)
    for (let i = 0; i < order.length; i += 1)
      out[i] = remap[this.values[order[i] as number] as number] as number
    return out
  }
}

/** A growing column of whole numbers. */
export class NumberColumn {
  private values = new Int32Array(64)
  length = 0

  push(value: number): void {
    if (this.length === this.values.length) {
      const larger = new Int32Array(this.values.length * 2)
      larger.set(this.values)
      this.values = larger
    }
    this.values[this.length] = value
    this.length += 1
  }

  get(index: number): number {
    return this.values[index] as number
  }

  /** The values in a new order. */
  arranged(order: Int32Array): Int32Array {
    const out = new Int32Array(order.length)
    for (let i = 0; i < order.length; i += 1) out[i] = this.values[order[i] as number] as number
    return out
  }
}

function grown(values: Codes): Codes {
  const larger =
    values instanceof Uint16Array
      ? new Uint16Array(values.length * 2)
      : new Uint32Array(values.length * 2)
  larger.set(values)
  return larger
}
