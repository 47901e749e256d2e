import { parseArgs } from 'node:util'
import { ensureDebianPackages } from './debian-packages'
import { oneCheck, sum, type Count } from './test-reports'
import { TestRun } from './test-run'
import { stages, type Stage } from './test-stages'

const chosen = chooseStages()
const run = new TestRun(process.cwd(), (line) => console.log(line))
for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
  process.once(signal, () => void run.close().finally(() => process.exit(130)))
}

const outcomes: { name: string; seconds: number; count: Count }[] = []
try {
  for (const stage of chosen) if (!run.isClosing) outcomes.push(await runStage(stage))
} finally {
  await run.close()
}

const total = sum(outcomes.map(({ count }) => count))
console.log('')
for (const { name, seconds, count } of outcomes) {
  const verdict = count.failed > 0 ? 'FAILED' : 'passed'
  console.log(
    `${name.padEnd(10)} ${verdict} ${seconds.toFixed(1).padStart(7)} s   ${count.passed} passed, ${count.failed} failed`,
  )
}
console.log(`${total.passed} passed, ${total.failed} failed`)
process.exit(total.failed === 0 ? 0 : 1)

async function runStage(stage: Stage): Promise<{ name: string; seconds: number; count: Count }> {
  console.log(`\n--- ${stage.name}`)
  const began = performance.now()
  const count = await outcomeOf(stage)
  return { name: stage.name, seconds: (performance.now() - began) / 1000, count }
}

async function outcomeOf(stage: Stage): Promise<Count> {
  try {
    await ensureDebianPackages(stage.packages ?? [], run.say)
    return await stage.run(run)
  } catch (failure) {
    // A stage that could not even run has failed; the others still have something to say.
    console.error(failure)
    return oneCheck(false)
  }
}

function chooseStages(): readonly Stage[] {
  const { values } = parseArgs({ options: { only: { type: 'string' } } })
  if (values.only === undefined) return stages
  const wanted = values.only.split(',')
  const unknown = wanted.filter((name) => !stages.some((stage) => stage.name === name))
  if (unknown.length > 0 || wanted.length === 0) {
    console.error(
      `There is no stage ${unknown.join(', ')}. There are: ${stages.map(({ name }) => name).join(', ')}.`,
    )
    process.exit(2)
  }
  return stages.filter(({ name }) => wanted.includes(name))
}
