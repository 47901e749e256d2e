import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { listAuditEntries } from '@/db/queries/audit'
import { findActorOfPerson } from '@/db/queries/people'
import { findBreak, houseChain } from '@/lib/domain/audit-entry'
import { createAdministrator } from '@/lib/use-cases/people/create-administrator'
import { createTestDatabase, type TestDatabase } from '@/tests/support/database'

let database: TestDatabase

beforeAll(async () => {
  database = await createTestDatabase()
})
afterAll(() => database.destroy())

describe('the first administrator', () => {
  it('is made with an organisation, by the app’s own login, and the trail says so without an address', async () => {
    const { personId } = await createAdministrator(
      { db: database.app },
      { organisation: ' Ember  Institute ', name: 'Bea Ember', address: 'Bea@Ember.example' },
    )
    const actor = await findActorOfPerson(database.app, personId)
    expect(actor).toMatchObject({
      name: 'Bea Ember',
      address: 'bea@ember.example',
      laboratories: [],
      committees: [],
    })
    expect(actor?.organisations.map(({ role }) => role)).toEqual(['administrator'])

    const entries = await listAuditEntries(database.app, houseChain)
    expect(
      entries.map(({ action, actorId, actorRole, body }) => ({
        action,
        actorId,
        actorRole,
        body: JSON.parse(body),
      })),
    ).toEqual([
      {
        action: 'organisation.created',
        actorId: null,
        actorRole: 'operator',
        body: { name: 'Ember Institute' },
      },
      {
        action: 'member.added',
        actorId: null,
        actorRole: 'operator',
        body: { personId, role: 'administrator' },
      },
    ])
    expect(findBreak(entries, null)).toBeNull()
    expect(JSON.stringify(entries)).not.toContain('bea@')
  })

  it('is refused for an organisation that exists, and nothing is left behind', async () => {
    const again = createAdministrator(
      { db: database.app },
      { organisation: 'ember institute', name: 'Eve', address: 'eve@ember.example' },
    )
    await expect(again).rejects.toMatchObject({ code: 'organisation-exists', field: 'organisation' })
    const people = await database.owner.selectFrom('vault.User').select('email').execute()
    expect(people).toEqual([{ email: 'bea@ember.example' }])
  })

  it('may be a person who is known already, whose name stays', async () => {
    await createAdministrator(
      { db: database.app },
      { organisation: 'Second House', name: 'B. E.', address: 'bea@ember.example' },
    )
    const people = await database.owner.selectFrom('vault.User').select(['email', 'name']).execute()
    expect(people).toEqual([{ email: 'bea@ember.example', name: 'Bea Ember' }])
  })

  it.each([
    [{ organisation: 'Third House', name: 'Eve', address: 'eve' }, 'bad-address'],
    [{ organisation: ' ', name: 'Eve', address: 'eve@third.example' }, 'too-short'],
    [{ organisation: 'Third House', name: '', address: 'eve@third.example' }, 'too-short'],
  ])('is refused when something is missing: %j', async (wanted, code) => {
    await expect(createAdministrator({ db: database.app }, wanted)).rejects.toMatchObject({ code })
  })
})
