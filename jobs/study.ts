import { runStudy } from '../server/commands/runStudy.js'
import { systemScope } from '../server/queries/scopeFor.js'
import type { JobContext } from '../server/scheduling/types.js'
import { plural } from '../server/shared/plural.js'

/** The nightly study of a network and its studios. */
export async function study({ networkId, deps, signal, progress }: JobContext): Promise<string> {
  const scope = await systemScope(networkId)
  if (!scope) return 'The network is gone.'
  // Reported one after the other; a run that was taken over is told so by the signal.
  let reported = Promise.resolve()
  const onProgress = (percent: number): void => {
    reported = reported.then(() => progress(percent)).catch(() => undefined)
  }
  const [network, ...studios] = await runStudy(scope, deps, { signal, onProgress })
  await reported
  if (!network) return 'Nothing to compare.'
  const { firings, lots, comparisons, findings } = network
  const looked = `${plural(firings, 'firing')}, ${plural(lots, 'lot')}, ${plural(comparisons, 'comparison')}: ${plural(findings, 'finding')}`
  if (studios.length === 0) return `${looked}.`
  const ofStudios = studios.reduce((sum, each) => sum + each.findings, 0)
  return `${looked}; ${formatOwn(ofStudios)} in ${plural(studios.length, 'studio')} studied alone.`
}

function formatOwn(findings: number): string {
  return findings === 0 ? 'none' : `${findings} more`
}
