import { randomBytes } from 'node:crypto'
import type { Response } from 'supertest'

/** An address that no other test sends from: throttles are counted by address. */
export function addressOfNobody(): string {
  const groups = randomBytes(14).toString('hex').match(/.{4}/g) ?? []
  return ['fd00', ...groups].join(':')
}

/** The session cookie's value that an answer sets, or undefined. */
export function cookieOf(answer: Response): string | undefined {
  return answer.get('Set-Cookie')?.map((cookie) => /^sid=([^;]+)/.exec(cookie)?.[1])[0]
}
