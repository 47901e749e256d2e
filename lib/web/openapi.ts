import { OpenAPIRegistry, OpenApiGeneratorV31 } from '@asteasolutions/zod-to-openapi'
import { z, type ZodObject, type ZodType } from 'zod'

/** One operation of the interface, in the schemas its handler really uses. */
export interface ApiOperation {
  readonly method: 'get' | 'post' | 'put'
  /** As the router has it: "/api/studies/{studyId}/returns". */
  readonly path: string
  readonly summary: string
  /** Whose session it needs; a public one needs none. */
  readonly access: 'coordinator' | 'contact' | 'reviewer' | 'public'
  readonly params?: ZodObject
  readonly query?: ZodObject
  readonly body?: { readonly type: string; readonly schema: ZodType }
  readonly answers: readonly ApiAnswer[]
}

interface ApiAnswer {
  readonly status: number
  readonly says: string
  readonly type?: string
  readonly schema?: ZodType
}

/** What every refusal looks like. */
const refusal = z.object({
  error: z.object({
    code: z.string(),
    message: z.string(),
    field: z.string().optional(),
    reference: z.string().optional(),
  }),
})

const cookie = 'session'

/** The interface as an OpenAPI 3.1 document, made of the schemas the handlers parse with. */
export function describeApi(operations: readonly ApiOperation[], baseUrl: string) {
  const registry = new OpenAPIRegistry()
  registry.registerComponent('securitySchemes', cookie, {
    type: 'apiKey',
    in: 'cookie',
    name: 'evenlot.session',
  })
  for (const operation of operations) register(registry, operation)
  return new OpenApiGeneratorV31(registry.definitions).generateDocument({
    openapi: '3.1.0',
    info: {
      title: 'Evenlot',
      version: '1',
      description:
        'What the pages ask of the server beside their forms. Writing needs a request that comes from a page of this site.',
    },
    servers: [{ url: baseUrl }],
  })
}

function register(registry: OpenAPIRegistry, operation: ApiOperation): void {
  const { method, path, summary, access, params, query, body, answers } = operation
  registry.registerPath({
    method,
    path,
    summary,
    description:
      access === 'public'
        ? 'Anyone may ask.'
        : `For a signed-in ${access}; to others it answers as if nothing were here.`,
    ...(access === 'public' ? {} : { security: [{ [cookie]: [] }] }),
    request: {
      ...(params ? { params } : {}),
      ...(query ? { query } : {}),
      ...(body ? { body: { required: true, content: { [body.type]: { schema: body.schema } } } } : {}),
    },
    responses: Object.fromEntries([...answers.map(described), ...refusals(operation).map(described)]),
  })
}

function described({ status, says, type = 'application/json', schema }: ApiAnswer) {
  return [status, { description: says, ...(schema ? { content: { [type]: { schema } } } : {}) }] as const
}

function refusals({ access, params, body, answers }: ApiOperation): ApiAnswer[] {
  const given = new Set(answers.map(({ status }) => status))
  const possible: ApiAnswer[] = [
    ...(params || body ? [{ status: 400, says: 'The request cannot be read as it is.' }] : []),
    ...(access === 'public' ? [] : [{ status: 401, says: 'No one is signed in.' }]),
    ...(body ? [{ status: 403, says: 'The request did not come from a page of this site.' }] : []),
    ...(access === 'public'
      ? []
      : [{ status: 404, says: 'Absent, or not for this person; the two look the same.' }]),
    { status: 500, says: 'A fault of the service, with a reference.' },
  ]
  return possible.filter(({ status }) => !given.has(status)).map((answer) => ({ ...answer, schema: refusal }))
}

/** A file that is not described further, for an answer's schema. */
export const fileContent = z.string().meta({ format: 'binary' })
