/** The methods, one a file. Pure: one object in, one object out, no clock, no database. */
export type { Counts } from './arguments.js'
export * from './distributions.js'
export { distributions } from './distributionByName.js'
export { wilsonInterval, type Interval } from './wilsonInterval.js'
export { clopperPearsonInterval } from './clopperPearsonInterval.js'
export {
  clusteredRate,
  clusteredRateFromSums,
  type ClusteredRate,
  type ClusterSums,
} from './clusteredRate.js'
export { riskRatio, type RatioInterval, type TwoGroups } from './riskRatio.js'
export { mantelHaenszelRiskRatio } from './mantelHaenszelRiskRatio.js'
export { fisherExact } from './fisherExact.js'
export { clusteredRiskRatio, type ClusteredRiskRatio } from './clusteredRiskRatio.js'
export { withinStrataTest, type StrataRow } from './withinStrataTest.js'
export type { WithinStrata } from './strata.js'
export { benjaminiHochberg } from './benjaminiHochberg.js'
export { pChart, type PChart } from './pChart.js'
export { laneyPChart, type LaneyPChart } from './laneyPChart.js'
export { runSignals, type RunSignal } from './runSignals.js'
export { cusum } from './cusum.js'
export { funnelLimits } from './funnelLimits.js'
export { funnelOverdispersion, type FunnelOverdispersion } from './funnelOverdispersion.js'
export { standardisedRatio } from './standardisedRatio.js'
export { cochranArmitageTrend } from './cochranArmitageTrend.js'
export { intraclassCorrelation, type IntraclassCorrelation } from './intraclassCorrelation.js'
export { preventableLosses, type PreventableLosses } from './preventableLosses.js'
export { sampleSizeTwoProportions } from './sampleSizeTwoProportions.js'
