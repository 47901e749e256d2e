/*
 * The people and laboratories of the demonstration. All of it is invented: no such committee, person, town or
 * laboratory is meant, and the addresses lie in the domain that is kept free for examples.
 */

export const organisationName = 'Committee on Natural-Fibre Twine'

export const people = {
  ines: {
    name: 'Ines Vardal',
    address: 'ines.vardal@twine-committee.example',
    role: 'administrator and coordinator',
  },
  tobin: { name: 'Tobin Okwuda', address: 'tobin.okwuda@twine-committee.example', role: 'coordinator' },
  marit: {
    name: 'Marit Quillane',
    address: 'marit.quillane@quillane-ropes.example',
    role: 'chair of the committee',
  },
  juno: {
    name: 'Juno Takerra',
    address: 'juno.takerra@takerra-nets.example',
    role: 'member of the committee',
  },
  leda: {
    name: 'Leda Morvant',
    address: 'leda.morvant@morvant-farms.example',
    role: 'observer on the committee',
  },
} as const

export interface DemonstrationLaboratory {
  readonly laboratory: string
  readonly city: string
  readonly country: string
  readonly contactName: string
  readonly address: string
  readonly zone: string
}

export const laboratories: readonly DemonstrationLaboratory[] = [
  [
    'Saltmarsh Fibre Laboratory',
    'Vila Estreme',
    'Portugal',
    'Duarte Penhal',
    'duarte.penhal@saltmarsh-fibre.example',
    'Europe/Lisbon',
  ],
  [
    'Brackwater Rope Testing',
    'Brackwater',
    'United Kingdom',
    'Orla Winsley',
    'orla.winsley@brackwater-rope.example',
    'Europe/London',
  ],
  [
    'Ostvarr Textile Bench',
    'Ostvarr',
    'Norway',
    'Sindre Haukvik',
    'sindre.haukvik@ostvarr-textile.example',
    'Europe/Oslo',
  ],
  [
    'Lindenau-Holm Seilprobe',
    'Holmlinden',
    'Germany',
    'Frieda Aschbrandt',
    'frieda.aschbrandt@seilprobe.example',
    'Europe/Berlin',
  ],
  [
    'Thornveld Sisal Works',
    'Thornveld',
    'South Africa',
    'Sipho Maretele',
    'sipho.maretele@thornveld-sisal.example',
    'Africa/Johannesburg',
  ],
  [
    'Uzani Fibre Station',
    'Uzani',
    'Kenya',
    'Achieng Moturi',
    'achieng.moturi@uzani-fibre.example',
    'Africa/Nairobi',
  ],
  [
    'Tamarind Quay Laboratory',
    'Tamarind Quay',
    'India',
    'Revathi Colmane',
    'revathi.colmane@tamarind-quay.example',
    'Asia/Kolkata',
  ],
  [
    'Jalpahar Jute House',
    'Jalpahar',
    'Bangladesh',
    'Farid Sarwaan',
    'farid.sarwaan@jalpahar-jute.example',
    'Asia/Dhaka',
  ],
  [
    'Kauri Head Materials',
    'Kauri Head',
    'New Zealand',
    'Hana Teroa',
    'hana.teroa@kauri-head.example',
    'Pacific/Auckland',
  ],
  [
    'Serra Funda Fibras',
    'Serra Funda',
    'Brazil',
    'Caio Brandes',
    'caio.brandes@serra-funda.example',
    'America/Sao_Paulo',
  ],
  [
    'Millrace Cordage Laboratory',
    'Millrace',
    'United States',
    'Della Fenwright',
    'della.fenwright@millrace-cordage.example',
    'America/New_York',
  ],
  [
    'Cedar Narrows Testing',
    'Cedar Narrows',
    'Canada',
    'Noah Latrelle',
    'noah.latrelle@cedar-narrows.example',
    'America/Vancouver',
  ],
].map(([laboratory = '', city = '', country = '', contactName = '', address = '', zone = '']) => ({
  laboratory,
  city,
  country,
  contactName,
  address,
  zone,
}))
