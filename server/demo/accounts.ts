import type { Role } from '../contract/roles.js'

export { DEMO_PASSWORD } from '../shared/demo.js'

/** An account that the sign-in page offers in demo mode. */
export interface DemoAccount {
  /** What the sign-in page says; stored as `users.demo_label`. */
  label: string
  email: string
  name: string
  /** Slug of the network. */
  network: string
  /** Studios by slug; null: the whole network. */
  roles: readonly { role: Role; studio: string | null }[]
}

/** In the order of the sign-in page. All names are made up; example.org takes no mail. */
export const DEMO_ACCOUNTS: readonly DemoAccount[] = [
  {
    label: 'Technician at Otter Stair',
    email: 'ines@example.org',
    name: 'Ines',
    network: 'kettle-ring',
    roles: [{ role: 'technician', studio: 'otter-stair' }],
  },
  {
    label: 'Technician at Plum Yard and Nine Buckets',
    email: 'jonas@example.org',
    name: 'Jonas',
    network: 'kettle-ring',
    roles: [
      { role: 'technician', studio: 'plum-yard' },
      { role: 'technician', studio: 'nine-buckets' },
    ],
  },
  {
    label: 'Owner of Plum Yard',
    email: 'tove@example.org',
    name: 'Tove',
    network: 'kettle-ring',
    roles: [{ role: 'owner', studio: 'plum-yard' }],
  },
  {
    label: 'Owner of Otter Stair and Mooring Loft',
    email: 'maud@example.org',
    name: 'Maud',
    network: 'kettle-ring',
    roles: [
      { role: 'owner', studio: 'otter-stair' },
      { role: 'owner', studio: 'mooring-loft' },
    ],
  },
  {
    label: 'Education lead of the Kettle Ring',
    email: 'sabine@example.org',
    name: 'Sabine',
    network: 'kettle-ring',
    roles: [{ role: 'education-lead', studio: null }],
  },
  {
    label: 'Network admin of the Kettle Ring',
    email: 'bram@example.org',
    name: 'Bram',
    network: 'kettle-ring',
    roles: [{ role: 'network-admin', studio: null }],
  },
  {
    label: 'Owner in another network, the Salt Pair',
    email: 'orla@example.org',
    name: 'Orla',
    network: 'salt-pair',
    roles: [
      { role: 'owner', studio: 'low-tide' },
      { role: 'owner', studio: 'high-tide' },
    ],
  },
]
