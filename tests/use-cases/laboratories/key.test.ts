import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { codeOf } from '@/db/seed/stage-study'
import { laboratories } from '@/db/seed/twine-people'
import type { Context } from '@/lib/context'
import { readLaboratories, revealKey } from '@/lib/use-cases/laboratories/read-laboratories'
import { watchReturns } from '@/lib/use-cases/returns/watch-returns'
import { readStudy } from '@/lib/use-cases/studies/read-study'
import type { TestWorld } from '../../support/test-world'
import { auditedBy, contact, coordinatedWorld, entryOf, openedStudy } from '../studies/coordinated-study'

let world: TestWorld
let asCoordinator: Context
let studyId: string
let code: string
beforeAll(async () => {
  world = await coordinatedWorld()
  asCoordinator = await world.as(world.coordinator)
  studyId = (await openedStudy(world)).studyId
  code = await codeOf(world, { contact, studyId })
})
afterAll(() => world?.destroy())

describe('which laboratory is which', () => {
  it('is shown to a coordinator, and each reading is recorded', async () => {
    for (const _ of [1, 2]) {
      const audited = await auditedBy(world, studyId, async () => {
        expect(await revealKey(asCoordinator, { studyId })).toEqual([
          { code, laboratory: laboratories[0]!.laboratory },
        ])
      })
      expect(audited).toEqual([
        entryOf(asCoordinator.actor.personId, 'administrator', { action: 'key.read', version: 1, codes: 1 }),
      ])
    }
  })

  it('stands in no other reading: names without codes, codes without names', async () => {
    const list = JSON.stringify((await readLaboratories(asCoordinator, { studyId })).invitations)
    expect(list).toContain(laboratories[0]!.laboratory)
    expect(list).not.toContain(`"${code}"`)
    const lanes = JSON.stringify([
      await watchReturns(asCoordinator, { studyId }),
      await readStudy(asCoordinator, { studyId }),
    ])
    expect(lanes).toContain(`"${code}"`)
    for (const { laboratory, address, contactName } of laboratories.slice(0, 3))
      for (const word of [laboratory, address, contactName]) expect(lanes).not.toContain(word)
  })
})
