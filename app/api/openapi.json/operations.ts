import { z } from 'zod'
import { schemas as invitations } from '@/app/api/invitations/schemas'
import { schemas as participations } from '@/app/api/participations/schemas'
import { returnsAnswer, studyParams } from '@/app/api/studies/[studyId]/returns/schema'
import { trailAnswer } from '@/app/api/studies/[studyId]/trail/schema'
import { fileContent, type ApiOperation } from '@/lib/web/openapi'

const ok = (schema: z.ZodType, says = 'As asked.') => ({ status: 200, says, schema })
const file = (type: string, says: string) => ({ status: 200, says, type, schema: fileContent })

const forLaboratories: ApiOperation[] = [
  {
    method: 'put',
    path: '/api/participations/{studyId}/draft',
    summary: 'Keep the draft of the sheet',
    access: 'contact',
    params: participations.studyParams,
    body: { type: 'application/json', schema: participations.draft },
    answers: [
      ok(participations.draftKept, 'The draft is kept. Nothing is returned yet.'),
      {
        status: 409,
        says: 'Another page wrote it since; what stands instead.',
        schema: participations.draftChangedElsewhere,
      },
    ],
  },
  {
    method: 'post',
    path: '/api/participations/{studyId}/uploads',
    summary: 'Send a file of results to be checked',
    access: 'contact',
    params: participations.studyParams,
    body: { type: 'multipart/form-data', schema: z.object({ file: fileContent }) },
    answers: [
      {
        status: 201,
        says: 'The file is kept and will be read. Nothing is returned yet.',
        schema: participations.uploadReceived,
      },
      { status: 413, says: 'The file is too large.' },
      { status: 415, says: 'The file is of a kind that is not read.' },
    ],
  },
  {
    method: 'get',
    path: '/api/participations/{studyId}/uploads/{uploadId}',
    summary: 'How far the reading of a file has come',
    access: 'contact',
    params: participations.uploadParams,
    answers: [ok(participations.uploadState)],
  },
  {
    method: 'get',
    path: '/api/participations/{studyId}/uploads/{uploadId}/file',
    summary: 'The file as it was sent',
    access: 'contact',
    params: participations.uploadParams,
    answers: [file('application/octet-stream', 'The same bytes.')],
  },
  {
    method: 'get',
    path: '/api/participations/{studyId}/workbook',
    summary: 'The workbook to fill in',
    access: 'contact',
    params: participations.studyParams,
    query: participations.workbookQuery,
    answers: [
      file(
        'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet',
        'A workbook made for this study.',
      ),
    ],
  },
]

const forCoordinators: ApiOperation[] = [
  {
    method: 'get',
    path: '/api/studies/{studyId}/returns',
    summary: 'Who has returned and who is late, by code',
    access: 'coordinator',
    params: studyParams,
    answers: [ok(returnsAnswer)],
  },
  {
    method: 'get',
    path: '/api/studies/{studyId}/returns/csv',
    summary: 'The same as a file',
    access: 'coordinator',
    params: studyParams,
    answers: [file('text/csv', 'One row a laboratory, by its code.')],
  },
  {
    method: 'get',
    path: '/api/studies/{studyId}/trail',
    summary: 'The audit trail with everything its digests are made of',
    access: 'coordinator',
    params: studyParams,
    answers: [ok(trailAnswer)],
  },
  {
    method: 'get',
    path: '/api/studies/{studyId}/analysis',
    summary: 'Whether the analysis asked for last is there',
    access: 'coordinator',
    params: studyParams,
    answers: [ok(z.object({ number: z.int().nullable(), done: z.boolean() }))],
  },
  {
    method: 'get',
    path: '/api/studies/{studyId}/coded/{file}',
    summary: "A measurand's coded results (.csv) or its analysis (.json)",
    access: 'reviewer',
    params: z.object({ studyId: z.uuid(), file: z.string() }),
    answers: [file('application/octet-stream', 'The file.')],
  },
]

const forAnyone: ApiOperation[] = [
  {
    method: 'post',
    path: '/api/invitations/read',
    summary: 'What stands behind an invitation link',
    access: 'public',
    body: { type: 'application/json', schema: invitations.read },
    answers: [ok(invitations.invitation)],
  },
  {
    method: 'post',
    path: '/api/sign-in',
    summary: 'Sign in by a mailed link or code; leads to a page',
    access: 'public',
    body: {
      type: 'application/x-www-form-urlencoded',
      schema: z.object({ address: z.string(), token: z.string().optional(), code: z.string().optional() }),
    },
    answers: [{ status: 303, says: 'To the page wanted, with the session; or back with the reason.' }],
  },
  {
    method: 'get',
    path: '/api/auth/{nextauth}',
    summary: 'The session, at /api/auth/session; nothing else is open',
    access: 'public',
    params: z.object({ nextauth: z.literal('session') }),
    answers: [
      ok(
        z
          .object({ user: z.object({ email: z.string() }).partial(), expires: z.string() })
          .partial()
          .nullable(),
      ),
    ],
  },
  {
    method: 'post',
    path: '/api/auth/{nextauth}',
    summary: 'Closed: every address answers 404',
    access: 'public',
    params: z.object({ nextauth: z.string() }),
    answers: [{ status: 404, says: 'Always.' }],
  },
  {
    method: 'get',
    path: '/api/health/live',
    summary: 'Whether the process answers',
    access: 'public',
    answers: [ok(z.object({ status: z.literal('live') }))],
  },
  {
    method: 'get',
    path: '/api/health/ready',
    summary: 'Whether requests can be served',
    access: 'public',
    answers: [
      ok(z.object({ status: z.literal('ready') })),
      { status: 503, says: 'Not now.', schema: z.object({ status: z.literal('not ready') }) },
    ],
  },
  {
    method: 'get',
    path: '/api/openapi.json',
    summary: 'This document',
    access: 'public',
    answers: [ok(z.record(z.string(), z.unknown()))],
  },
]

/** Every operation under app/api; a test reads the folder and fails when one is missing here. */
export const operations: readonly ApiOperation[] = [...forLaboratories, ...forCoordinators, ...forAnyone]
