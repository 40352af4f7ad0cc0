import type { Role } from '#shared/permissions'

export interface DemoPerson {
  key: string
  name: string
  roles: Role[]
  locale: 'en' | 'de'
  password: string
  pin: string
}

export const demoDomain = 'tarnside.example'

/** The staff of the demo shop. Invented; these sign-ins exist in the demo on loopback and nowhere else. */
export const demoStaff: DemoPerson[] = [
  {
    key: 'manager',
    name: 'Maren Tolvik',
    roles: ['manager'],
    locale: 'en',
    password: 'tarnside-manager',
    pin: '110011',
  },
  {
    key: 'head',
    name: 'Jarek Ondosch',
    roles: ['head_technician'],
    locale: 'en',
    password: 'tarnside-head',
    pin: '220022',
  },
  {
    key: 'technician',
    name: 'Ilse Brannoch',
    roles: ['technician'],
    locale: 'en',
    password: 'tarnside-technician',
    pin: '330033',
  },
  {
    key: 'bench',
    name: 'Sefu Quorra',
    roles: ['technician', 'counter'],
    locale: 'en',
    password: 'tarnside-bench',
    pin: '440044',
  },
  {
    key: 'counter',
    name: 'Dunja Pellworm',
    roles: ['counter'],
    locale: 'en',
    password: 'tarnside-counter',
    pin: '550055',
  },
  {
    key: 'desk',
    name: 'Timo Aarvikko',
    roles: ['counter'],
    locale: 'de',
    password: 'tarnside-desk',
    pin: '660066',
  },
]

export const firstNames = [
  'Abelone',
  'Bertil',
  'Cosima',
  'Dagny',
  'Emeric',
  'Fenja',
  'Gaspard',
  'Hedda',
  'Ilario',
  'Jolanda',
  'Kaspian',
  'Ludmila',
  'Maarit',
  'Nevio',
  'Oriel',
  'Petronella',
  'Quirin',
  'Radka',
  'Svenja',
  'Tancred',
  'Ulrike',
  'Valdis',
  'Wendela',
  'Xenia',
  'Yrsa',
  'Zdenko',
  'Amina',
  'Bao',
  'Chidi',
  'Devika',
  'Eun',
  'Farid',
  'Goran',
  'Hana',
  'Ikaika',
  'Jamila',
] as const

export const lastNames = [
  'Aldersee',
  'Brookhalm',
  'Czernova',
  'Dunvale',
  'Eisfurt',
  'Fjordland',
  'Grauberg',
  'Holmqvarn',
  'Islebeck',
  'Jurasek',
  'Kaltbrunnen',
  'Lindroft',
  'Moorwald',
  'Nordquell',
  'Ostergaten',
  'Pinewick',
  'Quellner',
  'Rimehart',
  'Schneebiel',
  'Tornvall',
  'Uferstein',
  'Vintersoe',
  'Weissmoor',
  'Yarrowfell',
  'Zirbental',
  'Adebayor',
  'Banerjeel',
  'Castellone',
  'Durandel',
  'Eriksmo',
] as const
