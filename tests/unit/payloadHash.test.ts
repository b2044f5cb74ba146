import { expect, it } from 'vitest'
import { payloadHash } from '../../server/commands/payloadHash.js'

it('is the same for the same values in any order of keys', () => {
  expect(payloadHash({ a: 1, b: { c: [1, { e: 2, d: 3 }] } })).toBe(
    payloadHash({ b: { c: [1, { d: 3, e: 2 }] }, a: 1 }),
  )
})

it('is another one for another order of a list, another value or a missing null', () => {
  const hash = payloadHash({ a: [1, 2], b: null })
  expect(payloadHash({ a: [2, 1], b: null })).not.toBe(hash)
  expect(payloadHash({ a: [1, 3], b: null })).not.toBe(hash)
  expect(payloadHash({ a: [1, 2] })).not.toBe(hash)
})

it('takes what is undefined as not there, as JSON does', () => {
  expect(payloadHash({ a: 1, b: undefined })).toBe(payloadHash({ a: 1 }))
})
