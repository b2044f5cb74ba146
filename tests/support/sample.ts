import { v7 } from 'uuid'
import { z } from 'zod'

/** What a value must be, as far as a JSON schema says it. */
interface Shape {
  type?: string
  format?: string
  const?: unknown
  enum?: unknown[]
  anyOf?: Shape[]
  oneOf?: Shape[]
  allOf?: Shape[]
  properties?: Record<string, Shape>
  required?: string[]
  items?: Shape
  minItems?: number
  minimum?: number
  minLength?: number
}

/** What a name says of its value that a schema cannot. */
const BY_NAME: Readonly<Record<string, () => unknown>> = {
  timeZone: () => 'Europe/Lisbon',
  currency: () => 'EUR',
  factor: () => 'clay_body',
  fault: () => 's-crack',
  email: () => `${v7()}@example.org`,
  name: () => `Name ${v7()}`,
  password: () => 'seven grey saggars',
  isReference: () => false,
  cursor: () => undefined,
}

/** The value of a uid that the sample needs, by the name of its field; undefined: a new one. */
export type UidOf = (name: string) => string | undefined

/** A value that the schema takes: what is required, and as little as possible of the rest. */
export function sample(schema: z.ZodType, uidOf: UidOf): unknown {
  const shape = z.toJSONSchema(schema, { io: 'input', unrepresentable: 'any' }) as Shape
  return valueOf(shape, 'body', uidOf)
}

function valueOf(shape: Shape, name: string, uidOf: UidOf): unknown {
  if (shape.const !== undefined) return shape.const
  const known = BY_NAME[name]
  if (known) return known()
  const choice = shape.anyOf ?? shape.oneOf
  // A reference that may be null is given: the wall is about what it points to.
  if (choice) return valueOf(choice[0] ?? {}, name, uidOf)
  if (shape.enum) return shape.enum[0]
  if (shape.allOf) return valueOf(Object.assign({}, ...shape.allOf) as Shape, name, uidOf)
  return OF_TYPE[shape.type ?? 'string']?.(shape, name, uidOf)
}

const OF_TYPE: Readonly<Record<string, (shape: Shape, name: string, uidOf: UidOf) => unknown>> = {
  object: (shape, _name, uidOf) =>
    Object.fromEntries(
      Object.entries(shape.properties ?? {})
        .filter(([key]) => shape.required?.includes(key))
        .map(([key, each]) => [key, valueOf(each, key, uidOf)]),
    ),
  array: (shape, name, uidOf) =>
    Array.from({ length: shape.minItems ?? 0 }, () => valueOf(shape.items ?? {}, name, uidOf)),
  integer: (shape) => Math.max(shape.minimum ?? 0, 0),
  number: (shape) => Math.max(shape.minimum ?? 0, 0),
  boolean: () => true,
  null: () => null,
  string: textOf,
}

function textOf(shape: Shape, name: string, uidOf: UidOf): string {
  if (shape.format === 'uuid') return uidOf(name) ?? v7()
  if (shape.format === 'date') return '2026-03-04'
  if (shape.format === 'date-time') return '2026-03-04T05:06:07.000Z'
  return uidOf(name) ?? 'sample text'.padEnd(shape.minLength ?? 0, '.')
}
