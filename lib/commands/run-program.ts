import { spawn, type SpawnOptions } from 'node:child_process'

interface Options {
  cwd?: string
  env?: Record<string, string>
  account?: Account
}

/** Who a program runs as: PostgreSQL's own tools refuse to run as root. */
export interface Account {
  name: string
  uid: number
  gid: number
}

/** Runs a program to its end and gives back what it printed; throws with its own words when it fails. */
export async function runProgram(program: string, args: string[], options: Options = {}): Promise<string> {
  const { code, stdout, stderr } = await collect(program, args, options)
  if (code !== 0) {
    throw new Error(`${program} ${args.join(' ')} ended with ${code}.\n${stderr || stdout}`.trimEnd())
  }
  return stdout
}

/** The same, where failing is one of the answers. */
export async function programSucceeds(program: string, args: string[], options: Options = {}) {
  const outcome = await collect(program, args, options).catch(() => ({ code: -1 }))
  return outcome.code === 0
}

/** Rewrites a command line so that it runs as the account, with no group or privilege of root left over. */
export function commandAs(account: Account | undefined, program: string, args: string[]): [string, string[]] {
  if (!account) return [program, args]
  const drop = [`--reuid=${account.uid}`, `--regid=${account.gid}`, '--clear-groups', '--']
  return ['setpriv', [...drop, program, ...args]]
}

function collect(program: string, args: string[], { cwd, env, account }: Options) {
  const [command, commandArgs] = commandAs(account, program, args)
  const options: SpawnOptions = {
    // The account may not be able to enter the caller's working directory.
    cwd: cwd ?? '/',
    env: { ...process.env, ...env, ...(account ? { HOME: '/' } : {}) },
    stdio: ['ignore', 'pipe', 'pipe'],
  }
  return new Promise<{ code: number; stdout: string; stderr: string }>((resolve, reject) => {
    const child = spawn(command, commandArgs, options)
    let stdout = ''
    let stderr = ''
    child.stdout?.on('data', (chunk: Buffer) => (stdout += chunk.toString()))
    child.stderr?.on('data', (chunk: Buffer) => (stderr += chunk.toString()))
    child.on('error', reject)
    // 'exit', not 'close': pg_ctl hands its output to the server it leaves behind, which never closes it.
    child.on('exit', (code, signal) => {
      setImmediate(() => resolve({ code: code ?? (signal ? 128 : 1), stdout, stderr }))
    })
  })
}
