import type { Sequelize } from 'sequelize'
import { Network, defineNetwork } from './Network.js'
import { User, defineUser } from './User.js'
import { OneTimeLink, defineOneTimeLink } from './OneTimeLink.js'
import { Studio, defineStudio } from './Studio.js'
import { Membership, defineMembership } from './Membership.js'
import { Kiln, defineKiln } from './Kiln.js'
import { Level, defineLevel } from './Level.js'
import { Firing, defineFiring } from './Firing.js'
import { Lot, defineLot } from './Lot.js'
import { LotLevel, defineLotLevel } from './LotLevel.js'
import { FiringLevel, defineFiringLevel } from './FiringLevel.js'
import { Loss, defineLoss } from './Loss.js'
import { ReportRevision, defineReportRevision } from './ReportRevision.js'
import { JobSlot, defineJobSlot } from './JobSlot.js'
import { Study, defineStudy } from './Study.js'
import { Finding, defineFinding } from './Finding.js'
import { AuditEvent, defineAuditEvent } from './AuditEvent.js'

export {
  Network,
  User,
  OneTimeLink,
  Studio,
  Membership,
  Kiln,
  Level,
  Firing,
  Lot,
  LotLevel,
  FiringLevel,
  Loss,
  ReportRevision,
  JobSlot,
  Study,
  Finding,
  AuditEvent,
}

/** Defines every model on one Sequelize. Later calls move the models to the newer connection. */
export function defineModels(sequelize: Sequelize): void {
  defineNetwork(sequelize)
  defineUser(sequelize)
  defineOneTimeLink(sequelize)
  defineStudio(sequelize)
  defineMembership(sequelize)
  defineKiln(sequelize)
  defineLevel(sequelize)
  defineFiring(sequelize)
  defineLot(sequelize)
  defineLotLevel(sequelize)
  defineFiringLevel(sequelize)
  defineLoss(sequelize)
  defineReportRevision(sequelize)
  defineJobSlot(sequelize)
  defineStudy(sequelize)
  defineFinding(sequelize)
  defineAuditEvent(sequelize)

  Firing.belongsTo(Kiln, { as: 'kiln', foreignKey: 'kilnId', constraints: false })
  Firing.belongsTo(Studio, { as: 'studio', foreignKey: 'studioId', constraints: false })
  Firing.hasMany(Lot, { as: 'lots', foreignKey: 'firingId', constraints: false })
  Lot.belongsTo(Firing, { as: 'firing', foreignKey: 'firingId', constraints: false })
  Lot.hasMany(LotLevel, { as: 'lotLevels', foreignKey: 'lotId', constraints: false })
  Lot.hasMany(Loss, { as: 'losses', foreignKey: 'lotId', constraints: false })
  Firing.hasMany(FiringLevel, { as: 'firingLevels', foreignKey: 'firingId', constraints: false })
  Membership.belongsTo(User, { as: 'user', foreignKey: 'userId', constraints: false })
  Membership.belongsTo(Network, { as: 'network', foreignKey: 'networkId', constraints: false })
  Membership.belongsTo(Studio, { as: 'studio', foreignKey: 'studioId', constraints: false })
}
