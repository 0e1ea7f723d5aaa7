import type { AnyContract } from '@/shared/contracts/contract'
import {
  containerSetUpContracts,
  containerTypes,
  densityBases,
  facilityContracts,
  fluidContracts,
  haulerContracts,
  machineContracts,
  personContracts,
  profileIds,
  siteContracts,
  streamContracts,
  streamKinds,
} from '@/shared/contracts/set-up'
import type { Act } from '@/shared/policies'
import { ruleClasses } from './rule-classes'

export const kindNames = [
  'sites',
  'containers',
  'machines',
  'fluids',
  'streams',
  'haulers',
  'facilities',
  'people',
] as const
export type KindName = (typeof kindNames)[number]

/** Where a select or a list of boxes takes its choices from. */
export type Choices =
  | {
      from: 'sites' | 'streams' | 'fluids' | 'time-zones' | 'volume-units' | 'mass-units' | 'roles'
    }
  | { from: 'words'; of: readonly string[]; words: string }

export type FieldSpec = {
  name: string
  input: 'line' | 'lines' | 'email' | 'tel' | 'password' | 'select' | 'many' | 'quantity' | 'figure'
  choices?: Choices
  most?: number
  /** May stay empty. */
  isOptional?: boolean
  hasHint?: boolean
  onlyNew?: boolean
}

export type Kind = {
  name: KindName
  contracts: Record<'list' | 'read' | 'create' | 'change' | 'retire' | 'restore', AnyContract>
  read: Act
  change: Act
  fields: readonly FieldSpec[]
  /** Contracts whose replies hold these records. */
  refreshes: readonly string[]
}

const line = (name: string, more: Partial<FieldSpec> = {}): FieldSpec => ({
  name,
  input: 'line',
  ...more,
})
const select = (name: string, choices: Choices, more: Partial<FieldSpec> = {}): FieldSpec => ({
  name,
  input: 'select',
  choices,
  ...more,
})

const party: readonly FieldSpec[] = [
  line('name', { most: 120 }),
  line('identificationNumber', { most: 40, hasHint: true }),
  { name: 'address', input: 'lines', most: 300, isOptional: true },
  { name: 'email', input: 'email' },
  { name: 'phone', input: 'tel', most: 40, isOptional: true },
  line('contactName', { most: 80, isOptional: true }),
]

const setUp = { read: 'read-set-up', change: 'change-set-up' } as const

const kinds: Record<KindName, Kind> = {
  sites: {
    name: 'sites',
    contracts: siteContracts,
    ...setUp,
    refreshes: ['listSite', 'readSite', 'readCatalogue', 'listRules'],
    fields: [
      line('code', { most: 16, hasHint: true }),
      line('name', { most: 80 }),
      { name: 'address', input: 'lines', most: 300, isOptional: true },
      { name: 'phone', input: 'tel', most: 40, isOptional: true },
      line('identificationNumber', { most: 40, isOptional: true, hasHint: true }),
      select('timeZone', { from: 'time-zones' }, { hasHint: true }),
      select('profile', { from: 'words', of: profileIds, words: 'profiles' }, { hasHint: true }),
      select('volumeUnit', { from: 'volume-units' }),
      select('massUnit', { from: 'mass-units' }),
    ],
  },
  containers: {
    name: 'containers',
    contracts: containerSetUpContracts,
    ...setUp,
    refreshes: [
      'listContainerRecord',
      'readContainerRecord',
      'listContainers',
      'readContainer',
      'readYard',
      'listRules',
    ],
    fields: [
      select('siteId', { from: 'sites' }),
      line('code', { most: 16, hasHint: true }),
      select('type', { from: 'words', of: containerTypes, words: 'containerTypes' }),
      line('description', { most: 80, isOptional: true }),
      select('streamId', { from: 'streams' }),
      { name: 'capacity', input: 'quantity', hasHint: true },
      { name: 'fillPercent', input: 'figure', hasHint: true },
      { name: 'tareKilograms', input: 'figure', isOptional: true },
      line('place', { most: 60, isOptional: true }),
    ],
  },
  machines: {
    name: 'machines',
    contracts: machineContracts,
    ...setUp,
    refreshes: ['listMachine', 'readMachine', 'readCatalogue'],
    fields: [
      select('siteId', { from: 'sites' }),
      line('code', { most: 16, hasHint: true }),
      line('kind', { most: 60, hasHint: true }),
      line('make', { most: 60, isOptional: true }),
      line('model', { most: 60, isOptional: true }),
      line('serial', { most: 60, isOptional: true }),
      select('fluidId', { from: 'fluids' }),
      { name: 'reservoir', input: 'quantity', isOptional: true, hasHint: true },
      { name: 'system', input: 'quantity', isOptional: true, hasHint: true },
    ],
  },
  fluids: {
    name: 'fluids',
    contracts: fluidContracts,
    ...setUp,
    refreshes: ['listFluid', 'readFluid', 'readCatalogue'],
    fields: [line('name', { most: 60, hasHint: true }), select('streamId', { from: 'streams' })],
  },
  streams: {
    name: 'streams',
    contracts: streamContracts,
    ...setUp,
    refreshes: ['listStream', 'readStream', 'readCatalogue', 'listRules'],
    fields: [
      line('code', { most: 24 }),
      line('name', { most: 80 }),
      select('kind', { from: 'words', of: streamKinds, words: 'streamKinds' }),
      line('labelWords', { most: 40, isOptional: true }),
      line('wasteCode', { most: 20, isOptional: true }),
      { name: 'density', input: 'figure', isOptional: true, hasHint: true },
      select('densityBasis', { from: 'words', of: densityBases, words: 'densityBases' }),
      {
        name: 'ruleClasses',
        input: 'many',
        choices: { from: 'words', of: ruleClasses, words: 'ruleClasses' },
        hasHint: true,
      },
    ],
  },
  haulers: {
    name: 'haulers',
    contracts: haulerContracts,
    ...setUp,
    refreshes: ['listHauler', 'readHauler', 'readCatalogue', 'readPickup'],
    fields: party,
  },
  facilities: {
    name: 'facilities',
    contracts: facilityContracts,
    ...setUp,
    refreshes: ['listFacility', 'readFacility', 'readCatalogue', 'readPickup'],
    fields: party,
  },
  people: {
    name: 'people',
    contracts: personContracts,
    read: 'read-people',
    change: 'change-people',
    refreshes: ['listPerson', 'readPerson'],
    fields: [
      line('name', { most: 120 }),
      { name: 'email', input: 'email' },
      { name: 'phone', input: 'tel', most: 40, isOptional: true },
      select('role', { from: 'roles' }),
      { name: 'siteIds', input: 'many', choices: { from: 'sites' }, hasHint: true },
      { name: 'password', input: 'password', onlyNew: true, hasHint: true },
    ],
  },
}

export function kindOf(name: string): Kind | undefined {
  const known = kindNames.find((one) => one === name)
  return known === undefined ? undefined : kinds[known]
}
