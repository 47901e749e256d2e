import { laneDue, type Lane, type Round } from './describe-lane'
import { showDistance } from './show-time'
import type { StudyState } from './study-states'

/** One matter that waits for a person, and where it is settled. */
export interface Need {
  readonly key: string
  readonly tone: 'danger' | 'warn' | 'info'
  /** A few words before the matter: "Due in 26 hours". */
  readonly when: string
  /** The laboratory it concerns, by its code; mail concerns laboratories by name and shows none. */
  readonly code?: string
  readonly words: string
  readonly action: {
    readonly label: string
    readonly station: 'plan' | 'laboratories' | 'results' | 'scrutiny' | 'review' | 'report'
    readonly at?: string
  }
}

export interface NeedsFacts {
  readonly study: { readonly state: StudyState; readonly deadline: { readonly dueAt: Date } }
  readonly now: Date
  readonly counts: { readonly accepted: number; readonly committee: number }
  readonly analysis: { readonly number: number; readonly upToDate: boolean } | null
  readonly computing: boolean
  readonly proposed: boolean
  readonly round: Round & { readonly lanes: readonly (Lane & { readonly message: string | null })[] }
  readonly invitations: readonly {
    readonly answer: 'accepted' | 'declined' | null
    readonly issuedAt: Date | null
    readonly isRefused: boolean
  }[]
}

const hour = 3_600_000

/** What needs someone today, the most pressing first. */
export function needsToday(facts: NeedsFacts): Need[] {
  const needs = {
    draft: draftNeeds,
    open: openNeeds,
    closed: closedNeeds,
    'in-review': reviewNeeds,
    published: () => [],
  }[facts.study.state](facts)
  const order = ['danger', 'warn', 'info']
  return needs.sort((a, b) => order.indexOf(a.tone) - order.indexOf(b.tone))
}

function draftNeeds({ invitations, counts }: NeedsFacts): Need[] {
  const count = invitations.length
  const needs: Need[] = [
    count < 2
      ? {
          key: 'name',
          tone: 'warn',
          when: 'To do first',
          words:
            count === 0
              ? 'No laboratory is named yet.'
              : 'One laboratory is named; a comparison needs two or more.',
          action: { label: 'Name the laboratories', station: 'laboratories', at: 'invite' },
        }
      : {
          key: 'send',
          tone: 'warn',
          when: 'Ready',
          words: `${count} laboratories are named and wait for their invitations.`,
          action: { label: 'Send the invitations', station: 'laboratories', at: 'send' },
        },
  ]
  if (counts.committee === 0) needs.push(noCommittee)
  return needs
}

const noCommittee: Need = {
  key: 'committee',
  tone: 'info',
  when: 'When you can',
  words: 'No committee is appointed; it reads the coded results before they are published.',
  action: { label: 'Appoint the committee', station: 'laboratories', at: 'committee' },
}

function openNeeds(facts: NeedsFacts): Need[] {
  const { round, now, study, counts } = facts
  const waiting = round.lanes.filter(({ returns }) => returns === 0)
  const returned = round.lanes.length - waiting.length
  const needs = [...waiting.flatMap((lane) => laneNeeds(lane, round)), ...mailNeeds(facts)]
  const lastDue = waiting.reduce(
    (latest, lane) => Math.max(latest, laneDue(lane, round.dueAt).getTime()),
    study.deadline.dueAt.getTime(),
  )
  if (returned > 0 && (now.getTime() > lastDue || waiting.length === 0))
    needs.push({
      key: 'close',
      tone: 'warn',
      when: waiting.length === 0 ? 'All returned' : 'Deadline passed',
      words: `${returned} of ${round.lanes.length} laboratories have returned. Closing freezes the returns for scrutiny.`,
      action: { label: 'Close for returns', station: 'results', at: 'close' },
    })
  if (counts.committee === 0) needs.push(noCommittee)
  return needs
}

function laneNeeds(lane: Lane & { message: string | null }, round: Round): Need[] {
  const now = new Date(round.now)
  const due = laneDue(lane, round.dueAt)
  const { code } = lane
  const begun =
    lane.draftEntries > 0
      ? `has ${lane.draftEntries} of ${round.places} values in its draft`
      : 'has not begun'
  const give = { label: 'Give it more time', station: 'results', at: code } as const
  if (lane.asksForTime)
    return [
      {
        key: `asks.${code}`,
        tone: 'warn',
        when: 'Answer needed',
        code,
        words: lane.message ? `asks for more time: “${lane.message}”` : 'asks for more time.',
        action: { label: 'Answer the request', station: 'results', at: code },
      },
    ]
  if (lane.state === 'late')
    return [
      {
        key: `late.${code}`,
        tone: 'danger',
        when: `Due ${showDistance(now, due)}`,
        code,
        words: `${begun} and has not returned.`,
        action: give,
      },
    ]
  if (due.getTime() - now.getTime() <= 48 * hour)
    return [
      {
        key: `due.${code}`,
        tone: 'warn',
        when: `Due ${showDistance(now, due)}`,
        code,
        words: `${begun}.`,
        action: give,
      },
    ]
  return []
}

function mailNeeds({ invitations, now, study }: NeedsFacts): Need[] {
  const needs: Need[] = []
  const refused = invitations.filter(({ isRefused, answer }) => isRefused && !answer).length
  const declined = invitations.filter(({ answer }) => answer === 'declined').length
  const silent = invitations.filter(
    ({ answer, issuedAt, isRefused }) =>
      !answer && !isRefused && issuedAt && now.getTime() - issuedAt.getTime() > 7 * 24 * hour,
  ).length
  const mayStillJoin = now < study.deadline.dueAt
  if (refused > 0)
    needs.push({
      key: 'refused',
      tone: 'danger',
      when: 'Mail refused',
      words: `${counted(refused, 'invitation was', 'invitations were')} refused by the server of the address.`,
      action: {
        label: refused === 1 ? 'Correct the address' : 'Correct the addresses',
        station: 'laboratories',
        at: 'list',
      },
    })
  if (silent > 0 && mayStillJoin)
    needs.push({
      key: 'silent',
      tone: 'info',
      when: 'No answer yet',
      words: `${counted(silent, 'laboratory has', 'laboratories have')} not answered for more than a week.`,
      action: {
        label: silent === 1 ? 'Send the link again' : 'Send the links again',
        station: 'laboratories',
        at: 'list',
      },
    })
  if (declined > 0 && mayStillJoin)
    needs.push({
      key: 'declined',
      tone: 'info',
      when: 'Declined',
      words: `${counted(declined, 'laboratory', 'laboratories')} declined. Another can still be invited.`,
      action: { label: 'Invite another', station: 'laboratories', at: 'invite' },
    })
  return needs
}

function closedNeeds(facts: NeedsFacts): Need[] {
  const { analysis, computing, counts, round } = facts
  if (computing) return []
  const needs: Need[] = round.lanes
    .filter((lane) => lane.asksForTime && lane.returns === 0)
    .map(({ code }) => ({
      key: `asks.${code}`,
      tone: 'info',
      when: 'Asked late',
      code,
      words: 'asked for more time. Returns are closed; reopening them is for all.',
      action: { label: 'Reopen for returns', station: 'results', at: 'reopen' },
    }))
  if (!analysis)
    needs.push({
      key: 'compute',
      tone: 'warn',
      when: 'To compute',
      words: 'Returns are closed and nothing is computed from them yet.',
      action: { label: 'Have it computed', station: 'scrutiny' },
    })
  else if (!analysis.upToDate)
    needs.push({
      key: 'stale',
      tone: 'warn',
      when: 'Out of date',
      words: `Analysis ${analysis.number} was made of other returns or decisions than those that stand now.`,
      action: { label: 'Have it computed again', station: 'scrutiny' },
    })
  else if (counts.committee === 0) needs.push({ ...noCommittee, tone: 'warn' })
  else
    needs.push({
      key: 'review',
      tone: 'info',
      when: 'When settled',
      words: `Analysis ${analysis.number} matches the returns. The committee can read it.`,
      action: { label: 'Put it before the committee', station: 'review' },
    })
  return needs
}

function reviewNeeds({ proposed }: NeedsFacts): Need[] {
  return [
    proposed
      ? {
          key: 'confirm',
          tone: 'warn',
          when: 'Second person',
          words: 'Publication is proposed and waits for another person to confirm it.',
          action: { label: 'See the proposal', station: 'report' },
        }
      : {
          key: 'propose',
          tone: 'info',
          when: 'With the committee',
          words: 'When the committee has no more to say, publication can be proposed.',
          action: { label: 'Propose publication', station: 'report' },
        },
  ]
}

function counted(count: number, one: string, many: string): string {
  return `${count} ${count === 1 ? one : many}`
}
