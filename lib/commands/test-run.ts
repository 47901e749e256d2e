import { spawn, type ChildProcess } from 'node:child_process'
import { mkdirSync, rmSync } from 'node:fs'
import { dataFolder } from './cluster-place'
import { openThrowAwayCluster, type PrivateCluster } from './private-cluster'

const TOOL_LIMIT_MS = 15 * 60_000

/** What the stages of one run of the tests share: its folder and, from the first that asks, its cluster. */
export class TestRun {
  readonly folder: string
  private cluster: Promise<PrivateCluster> | undefined
  private current: ChildProcess | undefined
  private closing: Promise<void> | undefined
  private readonly closers: (() => Promise<void>)[] = []

  constructor(
    readonly root: string,
    readonly say: (line: string) => void,
  ) {
    this.folder = `${dataFolder(root)}/test-report-${process.pid}`
    mkdirSync(this.folder, { recursive: true })
  }

  openCluster(): Promise<PrivateCluster> {
    this.cluster ??= openThrowAwayCluster({ root: this.root, say: this.say })
    return this.cluster
  }

  /** Runs one of the installed tools in sight; gives back its exit code. */
  tool(script: string, args: string[], env: Record<string, string> = {}): Promise<number> {
    return new Promise((resolve, reject) => {
      const child = spawn(process.execPath, [`node_modules/${script}`, ...args], {
        cwd: this.root,
        env: { ...process.env, NEXT_TELEMETRY_DISABLED: '1', ...env },
        stdio: ['ignore', 'inherit', 'inherit'],
        // A group of its own, so that it ends with all its workers: one caught in a loop hears nothing else.
        detached: true,
      })
      this.current = child
      const limit = setTimeout(() => {
        this.say(`${script} did not end within ${TOOL_LIMIT_MS / 60_000} minutes and is ended.`)
        endGroup(child)
      }, TOOL_LIMIT_MS)
      child.on('error', reject)
      child.on('exit', (code) => {
        clearTimeout(limit)
        resolve(code ?? 1)
      })
    })
  }

  onClose(close: () => Promise<void>): void {
    this.closers.push(close)
  }

  /** Once asked to close, no further stage begins. */
  get isClosing(): boolean {
    return this.closing !== undefined
  }

  close(): Promise<void> {
    this.closing ??= this.closeAll()
    return this.closing
  }

  private async closeAll(): Promise<void> {
    if (this.current) endGroup(this.current)
    for (const close of this.closers.splice(0).reverse()) await close()
    const cluster = await this.cluster?.catch(() => undefined)
    this.cluster = undefined
    await cluster?.stop()
    rmSync(this.folder, { recursive: true, force: true })
  }
}

function endGroup({ pid, exitCode, signalCode }: ChildProcess): void {
  if (pid === undefined || exitCode !== null || signalCode !== null) return
  process.kill(-pid, 'SIGKILL')
}
