import type { CommitteeRole } from './actor'

/** What each role on a committee may do, in the words of a choice. */
export const committeeRoles: readonly { value: CommitteeRole; label: string }[] = [
  { value: 'chair', label: 'Chair: reads, and may confirm a publication' },
  { value: 'member', label: 'Member: reads' },
  { value: 'observer', label: 'Observer: reads, without a say' },
]
