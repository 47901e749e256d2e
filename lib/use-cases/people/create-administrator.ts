import {
  ensurePerson,
  findOrganisationByName,
  insertOrganisation,
  insertOrganisationMember,
} from '@/db/queries/people'
import type { AnonymousContext } from '@/lib/context'
import { houseChain } from '@/lib/domain/audit-entry'
import { Refusal } from '@/lib/domain/errors'
import { readMailAddress } from '@/lib/domain/mail-address'
import { recordAudit } from '../record-audit'

interface Wanted {
  readonly organisation: string
  readonly name: string
  readonly address: string
}

/**
 * Makes an organisation and its first administrator. Run by an operator, who is nobody in the product, so the
 * trail names no actor.
 * @throws {Refusal} `organisation-exists`, `too-short`, `bad-address`
 */
export async function createAdministrator(
  { db }: Pick<AnonymousContext, 'db'>,
  wanted: Wanted,
): Promise<{ personId: string }> {
  const organisation = readName(wanted.organisation, 'organisation')
  const name = readName(wanted.name, 'name')
  const address = readMailAddress(wanted.address)
  return db.transaction().execute(async (trx) => {
    if (await findOrganisationByName(trx, organisation))
      throw new Refusal(
        'organisation-exists',
        `There is an organisation “${organisation}” already; its administrators add people.`,
        'organisation',
      )
    const organisationId = await insertOrganisation(trx, organisation)
    const { personId } = await ensurePerson(trx, { address, name })
    await insertOrganisationMember(trx, { organisationId, personId, role: 'administrator' })
    const common = { actor: null, role: 'operator', studyId: houseChain }
    await recordAudit(trx, {
      ...common,
      fact: { action: 'organisation.created', version: 1, name: organisation },
    })
    await recordAudit(trx, {
      ...common,
      fact: { action: 'member.added', version: 1, personId, role: 'administrator' },
    })
    return { personId }
  })
}

function readName(typed: string, field: string): string {
  const name = typed.normalize('NFC').replace(/\s+/g, ' ').trim()
  if (name.length < 2 || name.length > 200)
    throw new Refusal('too-short', `Give the ${field} in 2 to 200 characters.`, field)
  return name
}
