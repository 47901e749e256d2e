/** Every address of the product that code links or goes to, in one place. */
export const paths = {
  home: () => '/',
  studies: () => '/studies',
  newStudy: () => '/studies/new',
  study: (studyId: string) => `/studies/${studyId}`,
  station: (studyId: string, station: Station) => `/studies/${studyId}/${station}`,
  participation: (studyId: string) => `/participations/${studyId}`,
  resultSheet: (studyId: string) => `/participations/${studyId}/sheet`,
  resultUpload: (studyId: string) => `/participations/${studyId}/upload`,
  receipt: (studyId: string, number: string | number) => `/participations/${studyId}/receipts/${number}`,
  committee: (studyId: string) => `/committee/${studyId}`,
  invitation: () => '/invitation',
  published: () => '/published',
  publication: (slug: string) => `/published/${slug}`,
  signIn: (next?: string) => (next ? `/sign-in?next=${encodeURIComponent(next)}` : '/sign-in'),
  signInCode: (next?: string) => (next ? `/sign-in/code?next=${encodeURIComponent(next)}` : '/sign-in/code'),
  signInConfirm: () => '/sign-in/confirm',
  signOut: () => '/sign-out',
} as const

export const stations = [
  'plan',
  'materials',
  'laboratories',
  'results',
  'scrutiny',
  'precision',
  'review',
  'report',
  'trail',
] as const
export type Station = (typeof stations)[number]
