import { readFileSync } from 'node:fs'
import { fromOurPage, send, type Answer } from './send'

interface ServerReference {
  readonly exportedName: string
  readonly filename: string
  readonly workers: Readonly<Record<string, unknown>>
}

export interface ServerAction {
  readonly id: string
  readonly name: string
  /** The page of the build that it is posted to, such as /studies/[studyId]/plan. */
  readonly page: string
}

/** Every server action there is, as the build lists them. */
export function listActions(): ServerAction[] {
  const { node } = readBuildFile<{ node: Record<string, ServerReference> }>(
    'server/server-reference-manifest.json',
  )
  return Object.entries(node).flatMap(([id, { exportedName, workers }]) =>
    Object.keys(workers).map((worker) => ({
      id,
      name: exportedName,
      page: routeOf(worker.replace(/^app/, '')),
    })),
  )
}

/** Every page and handler there is, as the build lists them. */
export function listRoutes(): { kind: 'page' | 'route'; route: string }[] {
  const routes = readBuildFile<Record<string, string>>('app-path-routes-manifest.json')
  return Object.entries(routes).map(([file, route]) => ({
    kind: file.endsWith('/route') ? 'route' : 'page',
    route,
  }))
}

function routeOf(file: string): string {
  const route = readBuildFile<Record<string, string>>('app-path-routes-manifest.json')[file]
  if (!route) throw new Error(`the build has no route for ${file}`)
  return route
}

export function readBuildFile<T>(path: string): T {
  return JSON.parse(readFileSync(`.next/${path}`, 'utf8')) as T
}

export type Fields = Readonly<Record<string, string>>

export interface ActionCall {
  /** By its exported name. */
  readonly name: string
  readonly fields: Fields
  readonly path: string
  readonly cookie?: string
  readonly headers?: Readonly<Record<string, string>>
  readonly base?: string
}

/** Posts to an action as the page's script would, with (previous state, form) as its arguments. */
export function callAction({
  name,
  fields,
  path,
  cookie,
  headers = fromOurPage,
  base,
}: ActionCall): Promise<Answer> {
  const action = listActions().find((each) => each.name === name)
  if (!action) throw new Error(`the build has no action ${name}`)
  const parts = Object.entries(fields).map(([field, value]) => [`_1_${field}`, value] as const)
  return postParts([...parts, ['0', '[{"errors":{},"values":{}},"$K1"]']], {
    path,
    cookie,
    headers: { 'next-action': action.id, accept: 'text/x-component', ...headers },
    base,
  })
}

/** Posts to an action as a browser without scripts would: a plain form with the framework's hidden fields. */
export function postForm({
  name,
  fields,
  path,
  cookie,
  headers = fromOurPage,
  base,
}: ActionCall): Promise<Answer> {
  const action = listActions().find((each) => each.name === name)
  if (!action) throw new Error(`the build has no action ${name}`)
  const hidden: [string, string][] = [
    ['$ACTION_REF_1', ''],
    ['$ACTION_1:0', JSON.stringify({ id: action.id, bound: '$@1' })],
    ['$ACTION_1:1', '[{"errors":{},"values":{}}]'],
    ['$ACTION_KEY', 'k1'],
  ]
  return postParts([...hidden, ...Object.entries(fields)], { path, cookie, headers, base })
}

function postParts(
  parts: readonly (readonly [string, string])[],
  {
    headers,
    ...rest
  }: { path: string; cookie?: string; headers: Readonly<Record<string, string>>; base?: string },
): Promise<Answer> {
  const boundary = 'a-boundary-of-the-tests'
  const body = parts
    .map(
      ([name, value]) =>
        `--${boundary}\r\nContent-Disposition: form-data; name="${name}"\r\n\r\n${value}\r\n`,
    )
    .join('')
  return send({
    method: 'POST',
    body: `${body}--${boundary}--\r\n`,
    headers: { 'content-type': `multipart/form-data; boundary=${boundary}`, ...headers },
    ...rest,
  })
}

/** Where an action leads, whether it was called by script or by a plain form. */
export function redirectOf({ headers }: Answer): string | null {
  const carried = headers['x-action-redirect'] ?? headers.location
  return typeof carried === 'string' ? (carried.split(';')[0] ?? null) : null
}
