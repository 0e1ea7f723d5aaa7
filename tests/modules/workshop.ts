import type { Container } from '@/shared/contracts/containers'
import type { SignedInPerson } from '@/shared/contracts/session'
import type { Catalogue } from '@/shared/contracts/set-up'
import type { Drain } from '@/shared/contracts/drains'
import type { RecordedDrain } from '@/modules/offline/queued-record'

/** A small workshop as the API would tell it. */
const siteId = '6f0c2b4e-0000-4000-8000-000000000010'
const mineral = '6f0c2b4e-0000-4000-8000-000000000020'
const fluidId = '6f0c2b4e-0000-4000-8000-000000000030'
export const machineId = '6f0c2b4e-0000-4000-8000-000000000040'
const record = { version: '1', retiredAt: null }

export const technician: SignedInPerson = {
  id: '6f0c2b4e-0000-4000-8000-000000000001',
  name: 'Wren Dalquist',
  email: 'wren@quillbrook.example.com',
  role: 'technician',
  siteIds: [siteId],
  organisation: {
    id: '6f0c2b4e-0000-4000-8000-000000000002',
    name: 'Quillbrook Plant & Lift',
    isDemo: true,
  },
}

const stream = {
  id: mineral,
  code: 'mineral',
  name: 'Used mineral fluid',
  kind: 'fluid' as const,
  labelWords: 'USED OIL',
}

export const catalogue: Catalogue = {
  organisation: { id: technician.organisation.id, name: technician.organisation.name },
  sites: [
    {
      ...record,
      id: siteId,
      code: 'S2',
      name: 'Osk Landing workshop',
      address: '',
      phone: '',
      identificationNumber: '',
      timeZone: 'America/New_York',
      profile: 'us-federal-baseline',
      volumeUnit: 'gal_us',
      massUnit: 'lb_avdp',
    },
  ],
  streams: [{ ...record, ...stream, wasteCode: '', ruleClasses: [], density: null }],
  fluids: [{ ...record, id: fluidId, name: 'HM 68', streamId: mineral }],
  machines: [
    {
      ...record,
      id: machineId,
      siteId,
      code: 'M-09',
      make: 'Pendru',
      model: 'P200',
      kind: 'workshop press',
      serial: '',
      fluidId,
      fluidName: 'HM 68',
      streamId: mineral,
      reservoir: { value: '300', unit: 'L' },
      system: { value: '340', unit: 'L' },
      reservoirLitres: '300',
      systemLitres: '340',
    },
  ],
  haulers: [],
  facilities: [],
}

function drum(last: string, code: string, litres: string, roomLitres: string): Container {
  return {
    ...record,
    id: `6f0c2b4e-0000-4000-8000-0000000000${last}`,
    siteId,
    siteCode: 'S2',
    code,
    type: 'drum',
    description: '',
    streamId: mineral,
    stream,
    capacity: { value: '208', unit: 'L' },
    capacityLitres: '208',
    fillPercent: '95',
    fillLineLitres: '197.6',
    tareKilograms: null,
    place: '',
    litres,
    kilograms: '0',
    pieces: 0,
    roomLitres,
    level: 'room',
    hold: null,
    firstFilledOn: null,
    ageDays: null,
    hasEstimates: false,
    openMarks: 0,
    onPickup: null,
  }
}

export const containers = [drum('51', 'C-201', '97.6', '100'), drum('52', 'C-202', '0', '197.6')]

export const yard = {
  today: '2026-03-02',
  containers,
  marks: [],
  openFlags: 0,
  latestDrains: [],
  drainsToday: 0,
  litresToday: '0',
  pickups: [],
  lastMachines: [],
}

/** The server's answer to a recorded drain; the parts that screens do not look at are plain. */
export function recordedDrain(body: RecordedDrain): Drain {
  const by = { id: technician.id, name: technician.name }
  return {
    id: body.id,
    number: 'D-26-0028',
    siteId: body.siteId,
    machine: { id: machineId, code: 'M-09', description: 'Pendru P200, workshop press' },
    stream: { id: mineral, code: 'mineral', name: stream.name },
    occurredAt: body.occurredAt,
    occurredOn: '2026-03-02',
    timeZone: 'America/New_York',
    volume: body.volume,
    litres: '0',
    method: body.method,
    isEstimate: false,
    legs: [],
    filterCount: 0,
    state: 'standing',
    revision: 1,
    needsLook: false,
    recordedBy: by,
    recordedAt: body.occurredAt,
    fluid: null,
    spreadPercent: '1',
    filters: [],
    absorbents: null,
    breatherCaps: 0,
    refill: null,
    note: '',
    revisions: [],
    marks: [],
    containersAfter: [],
  }
}
