import { randomBytes } from 'node:crypto'
import { existsSync, readFileSync, writeFileSync } from 'node:fs'
import { freePort } from './free-port'

export interface Ports {
  web: number
  mailRelay: number
  mailbox: number
  mailboxWeb: number
}

const NAMES = ['web', 'mailRelay', 'mailbox', 'mailboxWeb'] as const

/** The same ports as last time where they are still free, so that a bookmark and a mailed link keep working. */
export async function keptPorts(folder: string, wishedWeb: number | undefined): Promise<Ports> {
  const path = `${folder}/ports.json`
  const last = readPorts(folder) ?? {}
  const ports = {} as Ports
  for (const name of NAMES) ports[name] = await freePort((name === 'web' && wishedWeb) || last[name])
  writeFileSync(path, JSON.stringify(ports))
  return ports
}

export function readPorts(folder: string): Partial<Ports> | undefined {
  const path = `${folder}/ports.json`
  return existsSync(path) ? (JSON.parse(readFileSync(path, 'utf8')) as Partial<Ports>) : undefined
}

/** What sessions and codes are sealed with; a new one would sign everybody out. */
export function keptSecret(folder: string): string {
  const path = `${folder}/auth-secret`
  if (!existsSync(path)) writeFileSync(path, randomBytes(48).toString('base64'), { mode: 0o600 })
  return readFileSync(path, 'utf8')
}
