import { Stop } from './say.mjs'

/** Every kind of test, in the order of the summary. */
export const KINDS = ['lint', 'types', 'unit', 'components', 'api', 'jobs', 'sizes', 'e2e']

/** The kinds that Vitest runs; `e2e` is Playwright's. */
export const VITEST_KINDS = ['unit', 'components', 'api', 'jobs']

/**
 * `test [--only KIND[,KIND]] [--keep FOLDER] [-- ARGS]`; ARGS go to Vitest or Playwright.
 *
 * @param {string[]} args
 * @returns {{ kinds: string[], keep: string | null, extra: string[] }}
 */
export function readTestArguments(args) {
  const split = args.indexOf('--')
  const own = split < 0 ? args : args.slice(0, split)
  const extra = split < 0 ? [] : args.slice(split + 1)
  const chosen = []
  let keep = null
  for (let place = 0; place < own.length; place += 1) {
    const [option, inline] = own[place].split(/=(.*)/s)
    const value = () => inline ?? own[(place += 1)] ?? ''
    if (option === '--only') chosen.push(...value().split(','))
    else if (option === '--keep') keep = value()
    else throw new Stop(`test does not know "${option}"; it knows --only, --keep and -- ARGS.`)
  }
  const strange = chosen.find((kind) => !KINDS.includes(kind))
  if (strange !== undefined) {
    throw new Stop(`There is no kind of test "${strange}"; there are ${KINDS.join(', ')}.`)
  }
  const kinds = chosen.length > 0 ? KINDS.filter((kind) => chosen.includes(kind)) : KINDS
  if (
    extra.length > 0 &&
    kinds.includes('e2e') &&
    kinds.some((kind) => VITEST_KINDS.includes(kind))
  ) {
    throw new Stop(
      'ARGS after -- are for Vitest or for Playwright: choose kinds of one with --only.',
    )
  }
  return { kinds, keep, extra }
}
