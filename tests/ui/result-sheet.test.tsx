// @vitest-environment jsdom
import { act } from 'react'
import { createRoot, type Root } from 'react-dom/client'
import { renderToString } from 'react-dom/server'
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest'
import { ResultSheet } from '@/app/(work)/participations/[studyId]/sheet/result-sheet'
import type { ReturnLayout } from '@/lib/spreadsheet/layout'

const push = vi.hoisted(() => vi.fn())
vi.mock('next/navigation', () => ({ useRouter: () => ({ push }) }))

const layout: ReturnLayout = {
  studyShortName: 'NT-01',
  measurands: [
    { id: 'force', name: 'Breaking force', unit: 'N', decimals: 1 },
    { id: 'stretch', name: 'Elongation', unit: '%', decimals: 2 },
  ],
  materials: [
    { id: 'a', name: 'sisal' },
    { id: 'b', name: 'hemp' },
  ],
  levels: [{ name: 'Replicate', count: 2 }],
}

const sheet = (entries: string[] = [], problems: { field: string; message: string }[] = []) => (
  <ResultSheet
    studyId="study"
    code="K31"
    zone="Europe/Lisbon"
    returns={0}
    layout={layout}
    entries={Array.from({ length: 8 }, (_, position) => entries[position] ?? '')}
    remark=""
    draftVersion={0}
    draftSavedAt={null}
    due="Due 14 Mar 2027, 17:00 in Lisbon (UTC+0), in 3 days."
    problems={problems}
    action={async (state) => state}
  />
)

let root: Root
const cell = (position: number) => document.querySelector<HTMLInputElement>(`#field-entry-${position}`)!

beforeEach(() => {
  Object.assign(globalThis, { IS_REACT_ACT_ENVIRONMENT: true })
  document.body.innerHTML = '<div id="page"></div>'
  sessionStorage.clear()
  push.mockReset()
  vi.stubGlobal(
    'fetch',
    vi.fn(async () => Response.json({ outcome: 'kept', version: 1, savedAt: '2027-03-01T14:02:00.000Z' })),
  )
})
afterEach(async () => {
  await act(async () => root?.unmount())
  vi.unstubAllGlobals()
})

async function show(entries?: string[], problems?: { field: string; message: string }[]): Promise<void> {
  root = createRoot(document.querySelector('#page')!)
  await act(async () => root.render(sheet(entries, problems)))
}

async function press(key: string, held: KeyboardEventInit = {}): Promise<void> {
  await act(async () => {
    document.activeElement!.dispatchEvent(
      new KeyboardEvent('keydown', { key, bubbles: true, cancelable: true, ...held }),
    )
  })
}

async function type(position: number, text: string): Promise<void> {
  await act(async () => {
    cell(position).focus()
    Object.getOwnPropertyDescriptor(HTMLInputElement.prototype, 'value')!.set!.call(cell(position), text)
    cell(position).dispatchEvent(new Event('input', { bubbles: true }))
  })
}

async function paste(text: string): Promise<void> {
  const event = Object.assign(new Event('paste', { bubbles: true, cancelable: true }), {
    clipboardData: { getData: () => text },
  })
  await act(async () => void document.activeElement!.dispatchEvent(event))
}

async function click(words: string): Promise<void> {
  const button = [...document.querySelectorAll<HTMLElement>('button, a')].find(
    ({ textContent }) => textContent?.trim() === words,
  )
  await act(async () => button!.click())
}

describe('without scripts', () => {
  const drawn = () => new DOMParser().parseFromString(renderToString(sheet(['1,234', 'abc'])), 'text/html')

  it('is a plain form in which every place is an input that Tab reaches', () => {
    const inputs = [...drawn().querySelectorAll('form table input')]
    expect(inputs.map((input) => input.getAttribute('name'))).toEqual(
      Array.from({ length: 8 }, (_, position) => `entry-${position}`),
    )
    expect(inputs.filter((input) => input.hasAttribute('tabindex'))).toEqual([])
  })

  it('says in words what is wrong, and asks about the comma by fields', () => {
    const page = drawn()
    expect(page.querySelector('#field-entry-1')!.getAttribute('aria-describedby')).toBe('field-entry-1-words')
    expect(page.querySelector('#field-entry-1-words')!.textContent).toContain('“abc” is not a number')
    expect(page.querySelectorAll('input[name=commaIs]')).toHaveLength(2)
  })

  it('has headers for its columns, its rows and its materials', () => {
    const headers = (scope: string) =>
      [...drawn().querySelectorAll(`th[scope=${scope}]`)].map((header) => header.textContent)
    expect(headers('col')).toEqual(['Test result', 'Breaking force (N)', 'Elongation (%)'])
    expect(headers('rowgroup')).toEqual(['sisal', 'hemp'])
    expect(headers('row')).toEqual(['Replicate 1', 'Replicate 2', 'Replicate 1', 'Replicate 2'])
  })
})

describe('with scripts', () => {
  it('is one tab stop, which follows the cell one is in', async () => {
    await show()
    const stops = () =>
      [...document.querySelectorAll<HTMLInputElement>('table input')]
        .filter(({ tabIndex }) => tabIndex === 0)
        .map(({ name }) => name)
    expect(stops()).toEqual(['entry-0'])
    await act(async () => cell(0).focus())
    await press('ArrowDown')
    await press('ArrowRight')
    expect(document.activeElement).toBe(cell(3))
    expect(stops()).toEqual(['entry-3'])
  })

  it('never sends the form by Enter, which goes down a row', async () => {
    await show()
    await type(0, '412,6')
    await press('Enter')
    expect(document.activeElement).toBe(cell(2))
    expect(push).not.toHaveBeenCalled()
  })

  it('takes a change back by Escape', async () => {
    await show(['5'])
    await type(0, '77')
    await press('Escape')
    expect(cell(0).value).toBe('5')
  })

  it('names the fault of a value at once, and its place by material, replicate and measurand', async () => {
    await show()
    await type(1, '3 %')
    expect(cell(1).getAttribute('aria-invalid')).toBe('true')
    expect(cell(1).title).toContain('Leave the unit out')
    expect(cell(1).getAttribute('aria-label')).toBe('sisal, replicate 1, Elongation (%)')
    await type(1, '3.25')
    expect(cell(1).hasAttribute('aria-invalid')).toBe(false)
  })

  it('asks about 1,234 with two buttons, and takes the one that was pressed', async () => {
    await show()
    await type(2, '1,234')
    expect(cell(2).value).toBe('1,234')
    await click('1234')
    expect(cell(2).value).toBe('1234')
  })

  it('pastes a block from the cell one is in, and says what lay beyond the edge', async () => {
    await show()
    await act(async () => cell(4).focus())
    await paste('1,5\t2,25\r\n3\t4\r\n5\t6\r\n')
    expect([4, 5, 6, 7].map((position) => cell(position).value)).toEqual(['1,5', '2,25', '3', '4'])
    expect(document.body.textContent).toContain(
      '4 values pasted. Beyond the edge of the sheet, and left out: 2.',
    )
  })

  it('shows one material at a time on a narrow screen, and goes on from one to the next', async () => {
    await show()
    const hidden = () =>
      [...document.querySelectorAll('tbody')].map(({ className }) => className.includes('max-sm:hidden'))
    expect(hidden()).toEqual([false, true])
    await click('Keep and go on')
    expect(hidden()).toEqual([true, false])
    expect(document.activeElement!.textContent).toContain('hemp')
  })

  it('does not go on with faults: it lists them, each leading to its cell', async () => {
    await show(['1', 'abc', '2', '3', '4', '5', '6', 'x'])
    await click('Check before returning')
    expect(push).not.toHaveBeenCalled()
    expect(document.activeElement!.getAttribute('role')).toBe('alert')
    const lines = [...document.querySelectorAll<HTMLAnchorElement>('[role=alert] a')]
    expect(lines.map(({ hash }) => hash)).toEqual(['#field-entry-1', '#field-entry-7'])
    await act(async () => lines[1]!.click())
    expect(document.activeElement).toBe(cell(7))
  })

  it('keeps the draft by the key of each place and then leads to the check', async () => {
    await show()
    await type(0, '412,6')
    await click('Check before returning')
    const [address, request] = vi.mocked(fetch).mock.calls[0]!
    expect(address).toBe('/api/participations/study/draft')
    expect(JSON.parse(String(request?.body))).toEqual({
      entries: { 'force|a|1': '412,6' },
      remark: '',
      seenVersion: 0,
    })
    expect(push).toHaveBeenCalledWith('/participations/study/sheet/check')
    expect(document.body.textContent).toContain('Draft kept 14:02. Not submitted yet.')
  })

  it('stays on the page when the draft could not be kept, and says so', async () => {
    vi.mocked(fetch).mockRejectedValue(new TypeError('no network'))
    await show()
    await type(0, '412,6')
    await click('Check before returning')
    expect(push).not.toHaveBeenCalled()
    expect(document.querySelector('[role=alert]')!.textContent).toContain('The server cannot be reached')
    expect(JSON.parse(Object.values({ ...sessionStorage })[0] as string)).toMatchObject({ isKept: false })
  })
})
