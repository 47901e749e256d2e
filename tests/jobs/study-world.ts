import type { TestDatabase } from '@/tests/support/database'

/** One open study with one invited laboratory, laid down row by row for the mails that speak of it. */
export async function addStudyWorld(database: TestDatabase) {
  const { owner } = database
  const person = async (email: string, name: string) => {
    const made = await owner
      .insertInto('vault.User')
      .values({ email, name })
      .returning('id')
      .executeTakeFirstOrThrow()
    return made.id
  }
  const coordinatorId = await person('bea@ember.example', 'Bea Ember')
  const contactId = await person('ada@quill.example', 'Ada Quill')
  const { organisation_id: organisationId } = await owner
    .insertInto('organisation')
    .values({ name: 'Ember Institute' })
    .returning('organisation_id')
    .executeTakeFirstOrThrow()
  const { study_id: studyId } = await owner
    .insertInto('study')
    .values({
      organisation_id: organisationId,
      short_name: 'Flour 27',
      title: 'Moisture in wheat flour',
      method: 'Oven drying',
      purpose: 'Precision of the method',
      created_by: coordinatorId,
    })
    .returning('study_id')
    .executeTakeFirstOrThrow()
  await owner
    .insertInto('study_deadline')
    .values({
      study_id: studyId,
      number: 1,
      due_at: '2027-03-14T17:00:00Z',
      zone: 'Europe/Lisbon',
      local_time: '2027-03-14T17:00',
      set_by: coordinatorId,
    })
    .execute()
  const { laboratory_id: laboratoryId } = await owner
    .insertInto('vault.laboratory')
    .values({ organisation_id: organisationId, name: 'Quill Laboratory' })
    .returning('laboratory_id')
    .executeTakeFirstOrThrow()
  const { invitation_id: invitationId } = await owner
    .insertInto('vault.invitation')
    .values({
      study_id: studyId,
      organisation_id: organisationId,
      laboratory_id: laboratoryId,
      address: 'ada@quill.example',
      contact_name: 'Ada Quill',
      zone: 'America/Sao_Paulo',
      invited_by: coordinatorId,
    })
    .returning('invitation_id')
    .executeTakeFirstOrThrow()
  return { studyId, organisationId, coordinatorId, contactId, invitationId }
}

export type StudyWorld = Awaited<ReturnType<typeof addStudyWorld>>

/** The laboratory takes part, under a code, with one return of three results and one extension. */
export async function addParticipation(database: TestDatabase, world: StudyWorld) {
  const { owner } = database
  const { studyId, invitationId, contactId, coordinatorId } = world
  const { participant_id: participantId } = await owner
    .insertInto('participant')
    .values({ study_id: studyId, code: 'K47' })
    .returning('participant_id')
    .executeTakeFirstOrThrow()
  await owner
    .insertInto('vault.identity')
    .values({ study_id: studyId, participant_id: participantId, invitation_id: invitationId })
    .execute()
  const { return_id: returnId } = await owner
    .insertInto('result_return')
    .values({ study_id: studyId, participant_id: participantId, number: 1 })
    .returning('return_id')
    .executeTakeFirstOrThrow()
  await owner
    .insertInto('vault.receipt')
    .values({
      study_id: studyId,
      return_id: returnId,
      participant_id: participantId,
      submission_key: 'key',
      body_digest: 'digest',
      receipt_number: 'R-7H2K',
      received_at: '2027-03-10T12:00:00Z',
      submitted_by: contactId,
      source: 'sheet',
    })
    .execute()
  const { measurand_id: measurandId } = await owner
    .insertInto('measurand')
    .values({ study_id: studyId, position: 1, name: 'Moisture', unit: 'g/100 g', decimals: 2 })
    .returning('measurand_id')
    .executeTakeFirstOrThrow()
  const { material_id: materialId } = await owner
    .insertInto('material')
    .values({ study_id: studyId, position: 1, name: 'Flour A' })
    .returning('material_id')
    .executeTakeFirstOrThrow()
  for (const [index, value] of ['13.41', '13.57', '13.62'].entries())
    await owner
      .insertInto('test_result')
      .values({
        study_id: studyId,
        return_id: returnId,
        measurand_id: measurandId,
        material_id: materialId,
        place: [index + 1],
        value,
      })
      .execute()
  const { request_id: requestId } = await owner
    .insertInto('vault.extension_request')
    .values({
      study_id: studyId,
      participant_id: participantId,
      message: 'Our oven is being repaired.',
      requested_by: contactId,
    })
    .returning('request_id')
    .executeTakeFirstOrThrow()
  for (const [number, dueAt] of [
    [1, '2027-03-20T17:00:00Z'],
    [2, '2027-03-25T17:00:00Z'],
  ] as const)
    await owner
      .insertInto('vault.extension')
      .values({
        study_id: studyId,
        participant_id: participantId,
        number,
        due_at: dueAt,
        reason: 'The oven is being repaired.',
        granted_by: coordinatorId,
      })
      .execute()
  return { participantId, returnId, requestId }
}
