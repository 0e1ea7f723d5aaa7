import type { ManifestFacts } from '@/server/pickups/pdf/manifest-facts'

type Line = ManifestFacts['lines'][number]
type Signature = ManifestFacts['signatures'][number]

export function factsLine(position: number, more: Partial<Line> = {}): Line {
  return {
    position,
    containerCode: `C-${200 + position}`,
    containerType: 'drum',
    containerDescription: '',
    containerCount: 1,
    stream: 'Used mineral hydraulic fluid',
    labelWords: 'USED OIL',
    wasteCode: '13 01 10',
    isFluid: true,
    value: '48.125',
    unit: 'gal_us',
    litres: '182.172942105',
    kilograms: '0',
    pieces: 0,
    massKilograms: '159.401324341875',
    density: '0.875',
    ...more,
  }
}

export function factsSignature(
  party: Signature['party'],
  more: Partial<Signature> = {},
): Signature {
  return {
    party,
    name: party === 'driver' ? 'Dov Invented' : 'Olga Invented',
    capacity: party === 'driver' ? 'Driver' : 'EHS officer',
    strokes: null,
    dispute: '',
    signedAt: '2025-09-27T10:31:00-05:00',
    documentSha256: 'ab'.repeat(32),
    ...more,
  }
}

/** Facts of an issued manifest with so many lines. */
export function factsOf(lineCount: number, more: Partial<ManifestFacts> = {}): ManifestFacts {
  const party = {
    identificationNumber: 'INV-ZZD000000001',
    address: '14 Quarry Lane\nInvented County',
    phone: '555-0160',
    email: 'desk@hauler.example.org',
    contactName: 'Dov Invented',
  }
  return {
    version: 1,
    kind: 'manifest',
    revision: 1,
    number: 'P-S1-25-004-K',
    orderNumber: '',
    note: '',
    paper: 'letter',
    locale: 'en-US',
    profile: 'us-federal-baseline',
    publicUrl: 'https://ebbmark.example.org',
    organisation: { name: 'Invented Works', email: 'office@works.example.org', phone: '555-0100' },
    site: {
      code: 'S1',
      name: 'Lower Yard',
      address: '1 Invented Road',
      phone: '555-0101',
      identificationNumber: 'INV-ZZG000000001',
      timeZone: 'America/Chicago',
      volumeUnit: 'gal_us',
    },
    hauler: {
      ...party,
      name: 'Invented Tankers',
      permit: { number: 'INV-0001', endsOn: '2025-12-31' },
    },
    facility: { ...party, name: 'Invented Recovery' },
    plannedOn: '2025-09-27',
    issuedAt: '2025-09-26T09:12:00-05:00',
    issuedBy: 'Olga Invented',
    lines: Array.from({ length: lineCount }, (_, index) => factsLine(index + 1)),
    signatures: [],
    voided: null,
    madeAt: '2025-09-26T14:12:00.000Z',
    ...more,
  }
}
