import { existsSync, readdirSync, readFileSync, readlinkSync, rmSync } from 'node:fs'
import { setTimeout as pause } from 'node:timers/promises'

/**
 * Is the server of this data folder alive? pg_ctl believes a zombie, or any process that was later
 * given the same number, so the process itself is asked: its name, its state and where it works.
 */
export function clusterIsRunning(data: string): boolean {
  const pid = serverPid(data)
  return pid !== undefined && worksIn(pid, data)
}

/** After kill -9: waits until the server's orphaned children are gone, then removes its stale pid file. */
export async function clearStalePid(data: string): Promise<void> {
  if (!existsSync(`${data}/postmaster.pid`) || clusterIsRunning(data)) return
  // Removing the file while a child still holds the shared memory would let two servers write one folder.
  for (let attempt = 0; anyoneWorksIn(data); attempt += 1) {
    if (attempt === 100) throw new Error(`Processes of a killed PostgreSQL still work in ${data}.`)
    await pause(100)
  }
  rmSync(`${data}/postmaster.pid`, { force: true })
}

function serverPid(data: string): number | undefined {
  try {
    const pid = Number(readFileSync(`${data}/postmaster.pid`, 'utf8').split('\n')[0])
    return Number.isSafeInteger(pid) && pid > 0 ? pid : undefined
  } catch {
    return undefined
  }
}

function anyoneWorksIn(data: string): boolean {
  return readdirSync('/proc').some((name) => /^\d+$/.test(name) && worksIn(Number(name), data))
}

function worksIn(pid: number, data: string): boolean {
  try {
    const status = readFileSync(`/proc/${pid}/status`, 'utf8')
    if (!/^Name:\s*postgres$/m.test(status) || /^State:\s*[ZX]/m.test(status)) return false
    return readlinkSync(`/proc/${pid}/cwd`) === data
  } catch {
    return false
  }
}

/** Whether a process of that number exists and has not merely left its entry behind. */
export function processIsAlive(pid: number): boolean {
  try {
    return !/^State:\s*[ZX]/m.test(readFileSync(`/proc/${pid}/status`, 'utf8'))
  } catch {
    return false
  }
}
