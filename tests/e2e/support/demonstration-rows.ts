import pg from 'pg'

export interface DemonstrationRows {
  readonly studies: readonly { studyId: string; shortName: string }[]
  readonly measurandIds: readonly string[]
  readonly slugs: readonly string[]
  /** Every laboratory's code in every study, with the address of its contact. */
  readonly codes: readonly { shortName: string; code: string; address: string }[]
  /** Ids of rows behind which a laboratory or its people stand. */
  readonly tellingIds: readonly string[]
  /** Instants at which returns came, to the minute, as data writes them. */
  readonly receivedAt: readonly string[]
  readonly uploadIds: readonly string[]
  readonly invitationIds: readonly string[]
}

/** What the database of the running product holds, read as its owner: the measure of what must not be found. */
export async function readDemonstrationRows(): Promise<DemonstrationRows> {
  return asOwner(async (client) => {
    const list = async <Row extends pg.QueryResultRow>(statement: string) =>
      (await client.query<Row>(statement)).rows
    const ids = async (statement: string) => (await list<{ id: string }>(statement)).map(({ id }) => id)
    return {
      studies: await list(
        `select study_id as "studyId", short_name as "shortName" from study where short_name like 'NT-%' order by short_name`,
      ),
      measurandIds: await ids(
        'select measurand_id as id from measurand join study using (study_id) order by short_name, position',
      ),
      slugs: await ids('select slug as id from publication'),
      codes: await list(`
        select short_name as "shortName", code, address from participant
        join study using (study_id) join vault.identity using (study_id, participant_id)
        join vault.invitation using (study_id, invitation_id)`),
      tellingIds: await ids(`
        select participant_id as id from participant
        union select return_id from result_return
        union select invitation_id from vault.invitation
        union select laboratory_id from vault.laboratory
        union select person_id from vault.contact
        union select mail_id from vault.mail
        union select upload_id from vault.upload`),
      receivedAt: await ids(
        `select distinct to_char(received_at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI') as id from vault.receipt`,
      ),
      uploadIds: await ids('select upload_id as id from vault.upload'),
      invitationIds: await ids('select invitation_id as id from vault.invitation limit 3'),
    }
  })
}

/** Runs work on one connection of the database's owner. */
export async function asOwner<T>(work: (client: pg.Client) => Promise<T>): Promise<T> {
  const client = new pg.Client({ connectionString: process.env.DATABASE_OWNER_URL })
  await client.connect()
  try {
    return await work(client)
  } finally {
    await client.end()
  }
}
