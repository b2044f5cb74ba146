import { z } from 'zod'

export const ROLES = ['technician', 'owner', 'education-lead', 'network-admin'] as const
export const role = z.enum(ROLES)
export type Role = z.infer<typeof role>

export const ROLE_NAMES: Readonly<Record<Role, string>> = {
  technician: 'technician',
  owner: 'owner',
  'education-lead': 'education lead',
  'network-admin': 'network admin',
}

/** Everything that may be allowed. The sentences that decide are in server/policies. */
export const ABILITIES = [
  'network.read',
  'today.read',
  'catalogue.read',
  'catalogue.edit',
  'studios.read',
  'studios.create',
  'studios.edit',
  'kilns.read',
  'kilns.edit',
  'people.read',
  'people.edit',
  'firings.read',
  'firings.pack',
  'firings.report',
  'firings.amend',
  'firings.void',
  'firings.makers',
  'losses.read',
  'findings.read',
  'jobs.read',
  'jobs.run',
  'audit.read',
] as const
export const ability = z.enum(ABILITIES)
export type Ability = z.infer<typeof ability>
