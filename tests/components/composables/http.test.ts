import { afterEach, describe, expect, it, vi } from 'vitest'
import { z } from 'zod'
import { ApiError, getJson, httpEvents, sendJson, withQuery } from '../../../src/api/http'

const answer = (status: number, body: unknown): void => {
  vi.stubGlobal(
    'fetch',
    vi.fn(() => Promise.resolve(new Response(JSON.stringify(body), { status }))),
  )
}
const caught = async (call: Promise<unknown>): Promise<ApiError> => {
  try {
    await call
  } catch (error) {
    if (error instanceof ApiError) return error
    throw error
  }
  throw new Error('The call was answered.')
}
const schema = z.object({ n: z.number() })
afterEach(() => vi.unstubAllGlobals())

describe('withQuery', () => {
  it('leaves out what is empty and escapes the rest', () => {
    expect(
      withQuery('/api/x', { kind: 'glaze', fault: undefined, q: null, text: '', name: 'a & b' }),
    ).toBe('/api/x?kind=glaze&name=a+%26+b')
    expect(withQuery('/api/x')).toBe('/api/x')
  })
})

describe('getJson', () => {
  it('gives the answer, checked and stripped to the contract', async () => {
    answer(200, { n: 3, more: true })
    expect(await getJson('/api/x', { schema, query: { page: 2 } })).toEqual({ n: 3 })
    expect(vi.mocked(fetch).mock.calls[0]?.[0]).toBe('/api/x?page=2')
  })

  it('turns a refusal into an error with its code and fields', async () => {
    answer(422, {
      error: {
        code: 'invalid',
        message: 'Look again.',
        fields: { name: 'Enter a name.' },
        requestId: 'r1',
      },
    })
    const error = await caught(getJson('/api/x', { schema }))
    expect(error).toMatchObject({
      status: 422,
      code: 'invalid',
      message: 'Look again.',
      fields: { name: 'Enter a name.' },
      requestId: 'r1',
    })
  })

  it('says so when the server cannot be reached', async () => {
    vi.stubGlobal(
      'fetch',
      vi.fn(() => Promise.reject(new TypeError('Failed to fetch'))),
    )
    expect(await caught(getJson('/api/x', { schema }))).toMatchObject({
      status: 0,
      code: 'offline',
    })
  })

  it('refuses an answer of another shape', async () => {
    answer(200, { n: 'three' })
    expect(await caught(getJson('/api/x', { schema }))).toMatchObject({ code: 'unexpected-answer' })
  })

  it('survives an error page that is no JSON', async () => {
    vi.stubGlobal(
      'fetch',
      vi.fn(() => Promise.resolve(new Response('<h1>Bad gateway</h1>', { status: 502 }))),
    )
    expect(await caught(getJson('/api/x', { schema }))).toMatchObject({
      status: 502,
      code: 'unexpected',
    })
  })
})

describe('sendJson', () => {
  it('sends JSON from the same origin', async () => {
    answer(200, { n: 1 })
    await sendJson('/api/x', { method: 'PUT', body: { a: 1 }, schema })
    expect(vi.mocked(fetch).mock.calls[0]?.[1]).toMatchObject({
      method: 'PUT',
      credentials: 'same-origin',
      body: '{"a":1}',
      headers: { 'content-type': 'application/json' },
    })
  })

  it('asks for a sign-in when the session has ended, except where a password was wrong', async () => {
    const asked = vi.fn()
    httpEvents.addEventListener('sign-in-needed', asked)
    answer(401, { error: { code: 'sign-in', message: 'Sign in.', requestId: 'r' } })
    await caught(sendJson('/api/x', { method: 'POST', schema, quiet401: true }))
    expect(asked).not.toHaveBeenCalled()
    await caught(sendJson('/api/x', { method: 'POST', schema }))
    expect(asked).toHaveBeenCalledOnce()
    httpEvents.removeEventListener('sign-in-needed', asked)
  })
})
