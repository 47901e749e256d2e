import { execFile } from 'node:child_process'
import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import ExcelJS from 'exceljs'
import type { AnalysisDocument } from '@/lib/statistics'

const root = fileURLToPath(new URL('../..', import.meta.url))
const data = (name: string): string => join(root, 'tests/statistics/reference/data', name)

let folder = ''
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'analyse-'))
})
afterAll(() => rm(folder, { recursive: true, force: true }))

type Run = { status: number; stdout: string; stderr: string }

function run(...args: string[]): Promise<Run> {
  return new Promise((resolve) => {
    execFile(
      process.execPath,
      ['--import', 'tsx', 'lib/commands/analyse.ts', ...args],
      { cwd: root, maxBuffer: 50_000_000 },
      (error, stdout, stderr) =>
        resolve({ status: typeof error?.code === 'number' ? error.code : 0, stdout, stderr }),
    )
  })
}

async function file(name: string, content: string | Uint8Array): Promise<string> {
  const path = join(folder, name)
  await writeFile(path, content)
  return path
}

function documentOf({ status, stdout, stderr }: Run): AnalysisDocument {
  expect(stderr).toBe('')
  expect(status).toBe(0)
  return JSON.parse(stdout) as AnalysisDocument
}

const SMALL = 'lab,material,value\nA,M,1.0\nA,M,1.2\nB,M,2.0\nB,M,2.4\n'

describe('the analyse command', () => {
  it('prints one document for a nested file, and the same bytes when run again', async () => {
    const first = await run(data('pastes.csv'), '--nest', 'batch')
    const { input, materials } = documentOf(first)
    expect(input.nesting).toEqual(['laboratory', 'batch', 'replicate'])
    // ANOVA of the set, R 4.2.2: s_r² 0.678, batches 8.43366666666667, laboratories 1.65730864197531.
    expect(materials[0]!.repeatability.variance).toBeCloseTo(0.678, 12)
    expect(materials[0]!.anova.components[1]!.variance).toBeCloseTo(8.43366666666667, 12)
    expect(materials[0]!.betweenLaboratory.variance).toBeCloseTo(1.65730864197531, 12)
    expect((await run(data('pastes.csv'), '--nest', 'batch')).stdout).toBe(first.stdout)
  })

  it('reads a semicolon file with decimal commas, renamed columns, limits, gaps and excluded rows', async () => {
    const path = await file(
      'comma.csv',
      '\ufeffLabor;Conc;Excluded\nA;1,0;\nA;1,2;\nB;2,0;\nB;2,4;\nC;<0,5;\nC;;\nD;9,9;misread\nD;3,1;\n',
    )
    const args = [path, '--columns', 'laboratory=labor,value=Conc', '--factor', '2']
    const { input, settings, materials } = documentOf(await run(...args))
    expect(input).toMatchObject({ results: 5, excluded: 1, censored: 1, missing: 1, materials: 1 })
    expect(settings.limitFactor).toBe(2)
    expect(materials[0]!.censored.cells).toEqual([{ laboratory: 'C', below: 1, above: 0, quantified: 0 }])
    const all = documentOf(await run(...args, '--all'))
    expect(all.input).toMatchObject({ results: 6, excluded: 0 })
  })

  it('reads the first sheet of a workbook as it reads a text file', async () => {
    const workbook = new ExcelJS.Workbook()
    const sheet = workbook.addWorksheet('Results')
    for (const line of SMALL.trim().split('\n')) {
      sheet.addRow(line.split(',').map((text) => (/^\d/.test(text) ? Number(text) : text)))
    }
    const path = await file('book.xlsx', new Uint8Array(await workbook.xlsx.writeBuffer()))
    const fromBook = documentOf(await run(path))
    const fromText = documentOf(await run(await file('text.csv', SMALL)))
    expect(fromBook.materials).toEqual(fromText.materials)
  })

  it('takes a reference value, a target and the plots that are asked for', async () => {
    const args = ['--reference', 'A=41.5:0.05', '--sigma', 'A=0.6', '--pairs', 'A:E,B:C']
    const { materials, youden } = documentOf(await run(data('e691_glucose.csv'), ...args))
    const [a, b] = materials
    expect(a!.trueness!.bias).toBeCloseTo(a!.mean! - 41.5, 12)
    expect(a!.assigned).toMatchObject({ value: 41.5, uncertainty: 0.05, source: 'reference', sigma: 0.6 })
    expect(a!.cells[0]!.scores.z).toBeCloseTo((a!.cells[0]!.mean! - 41.5) / 0.6, 12)
    expect(b!.trueness).toBeNull()
    expect(b!.reasons!['trueness']).toBe('not asked for')
    expect(youden!.map(({ x, y }) => [x, y])).toEqual([
      ['A', 'E'],
      ['B', 'C'],
    ])
  })

  it('keeps measurands apart and asks which one where there are several', async () => {
    const path = await file(
      'two.csv',
      'lab,measurand,value\nA,iron,1\nA,iron,2\nB,iron,3\nB,iron,5\nA,zinc,7\nB,zinc,8\n',
    )
    const refused = await run(path)
    expect(refused.status).toBe(2)
    expect(refused.stderr).toContain('column measurand: found iron, zinc, expected one of them')
    const { measurands, levelRelation, materials } = documentOf(await run(path, '--measurand', 'iron'))
    expect(measurands!.map(({ measurand }) => measurand)).toEqual(['iron'])
    expect(levelRelation).toBeNull()
    expect(materials[0]!.results).toBe(4)
  })

  it('looks at the other measurands of a file for an exchange, and for nothing else', async () => {
    // A second measurand a quarter higher than glucose, but for laboratory 3 and material C, where the names changed places.
    const [, ...lines] = (await readFile(data('e691_glucose.csv'), 'utf8')).trim().split('\n')
    const rows = lines.map((line) => {
      const [lab, material, , value] = line.split(',')
      const names = lab === 'L03' && material === 'C' ? ['second', 'first'] : ['first', 'second']
      return names.map((name, place) => {
        const text = place === 0 ? value! : (Number(value) * 1.25).toFixed(2)
        return [lab, material, name, text].join(',')
      })
    })
    const all = rows.flat().filter((row) => row !== '')
    const both = await file('both.csv', ['lab,material,measurand,value', ...all, ''].join('\n'))
    const own = all.filter((row) => row.includes(',first,'))
    const alone = await file('alone.csv', ['lab,material,measurand,value', ...own, ''].join('\n'))

    const ofBoth = documentOf(await run(both, '--measurand', 'first'))
    const ofOne = documentOf(await run(alone, '--measurand', 'first'))
    const exchanged = ofBoth.materials[2]!.proposals![0]!
    expect(exchanged).toMatchObject({
      laboratory: 'L03',
      kind: 'exchange',
      detail: 'first ↔ second',
      cells: ['C'],
    })

    const withoutIt = ofBoth.materials.map((one) => ({
      ...one,
      proposals: one.proposals!.filter(({ detail }) => detail !== exchanged.detail),
    }))
    const input = { ...ofBoth.input, sha256: ofOne.input.sha256 }
    expect({ ...ofBoth, input, materials: withoutIt }).toEqual(ofOne)
  })

  it('tries the other units of a study where a cell stands apart, and refuses a unit that is none', async () => {
    // Laboratory 3 writes mmol/L where mg/dL was asked for: each result over 18.016, glucose having 180.16 g/mol.
    const glucose = await readFile(data('e691_glucose.csv'), 'utf8')
    const converted = glucose.replaceAll(/^(L03,[A-E],\d,)([\d.]+)$/gm, (_, start: string, value: string) => {
      return `${start}${(Number(value) / 18.016).toFixed(3)}`
    })
    expect(converted).not.toBe(glucose)
    const path = await file('mmol.csv', converted)
    const proposed = documentOf(await run(path, '--unit', 'mg/dL', '--other-unit', 'mmol/L=18.016'))
    const first = proposed.materials[0]!.proposals!.find(({ laboratory }) => laboratory === 'L03')
    expect(first).toMatchObject({ kind: 'unitAllMaterials', detail: 'mmol/L' })
    const refused = await run(path, '--unit', 'zeros(9)')
    expect(refused).toMatchObject({ status: 2, stdout: '' })
    expect(refused.stderr).toContain('option --unit: found "zeros(9)", expected a unit such as mg/L')
  })

  it('names fifty planted faults in fifty lines, each with its row', async () => {
    const faults = [',M,1', 'A,,1', 'A,M,x', 'A,M,1.2.3', 'A,M,1,2']
    const lines = Array.from({ length: 50 }, (_, index) => faults[index % faults.length]!)
    const { status, stdout, stderr } = await run(
      await file('fifty.csv', `lab,material,value\n${lines.join('\n')}\n`),
    )
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' })
    const said = stderr.trim().split('\n')
    expect(said).toHaveLength(50)
    said.forEach((line, index) => expect(line).toContain(`: row ${index + 2}`))
  })

  it('checks units before shipping', async () => {
    const { homogeneity } = documentOf(await run(data('syn_homog.csv'), '--homogeneity', '--sigma', 'H1=1'))
    expect(homogeneity![0]).toMatchObject({
      material: 'H1',
      units: 15,
      target: 1,
      basic: true,
      checkPrecise: true,
    })
    expect(homogeneity![1]!.basic).toBeNull()
  })

  it('plans without a file', async () => {
    const { planning, materials } = documentOf(await run('--plan', 'p=8..10,n=2,gamma=2'))
    expect(materials).toEqual([])
    // ISO 5725-1, 6.3: A_r = 1.96 / √(2p(n − 1)) is 0.49 at p = 8, n = 2.
    expect(planning!.points.map(({ p }) => p)).toEqual([8, 9, 10])
    expect(planning!.points[0]!.repeatability).toBeCloseTo(0.49, 12)
  })

  it('names every fault of a file with its row and column and prints nothing else', async () => {
    const path = await file('faults.csv', 'Lab,Material,Value\nA,M,1.5\n,M,2\nB,,x1\nC,M,"1,5"\nD,M,1,2\n')
    const { status, stdout, stderr } = await run(path)
    expect(status).toBe(2)
    expect(stdout).toBe('')
    expect(stderr.trim().split('\n')).toEqual([
      `${path}: row 3, column Lab: found nothing, expected a name`,
      `${path}: row 4, column Value: found "x1", expected a decimal number, a limit such as <0.5 or >99, or nothing`,
      `${path}: row 4, column Material: found nothing, expected a name`,
      `${path}: row 5, column Value: found "1,5", expected a decimal number, a limit such as <0.5 or >99, or nothing`,
      `${path}: row 6: found 4 values, expected 3, as in the header`,
    ])
  })

  it('stops after fifty faults and counts the rest', async () => {
    const rows = Array.from({ length: 60 }, () => 'A,x').join('\n')
    const { stderr } = await run(await file('many.csv', `lab,value\n${rows}\n`))
    const lines = stderr.trim().split('\n')
    expect(lines).toHaveLength(51)
    expect(lines[50]).toBe('and 10 more')
  })

  it.each([
    [
      'a missing column',
      'lab,wert\nA,1\n',
      [],
      'row 1, column value: found the columns lab, wert, expected a column value',
    ],
    ['a level that has no column', SMALL, ['--nest', 'day'], 'expected a column day'],
    ['a column named twice', 'lab,value,value\nA,1,2\n', [], 'found two columns of this name, expected one'],
    ['a file without results', 'lab,value\n', [], 'found no row below the header'],
    ['an empty file', '', [], 'found an empty file'],
    [
      'an option for a material it does not have',
      SMALL,
      ['--sigma', 'Z=1'],
      'expected "Z", which an option names',
    ],
    ['a factor that is none', SMALL, ['--factor', '0'], 'option --factor'],
    ['an unknown option', SMALL, ['--nset', 'day'], "Unknown option '--nset'"],
  ])('refuses %s', async (_, content, args, words) => {
    const { status, stdout, stderr } = await run(await file('refused.csv', content), ...(args as string[]))
    expect(stderr).toContain(words)
    expect(status).toBe(2)
    expect(stdout).toBe('')
  })

  it('says each problem in one line, whatever a heading holds', async () => {
    const { status, stderr } = await run(await file('lines.csv', 'lab,"va\nlue","\u001b[2J"\nA,1,2\n'))
    expect(status).toBe(2)
    expect(stderr.trim().split('\n')).toHaveLength(1)
    expect(stderr).toContain('found the columns lab, va\\u000alue, \\u001b[2J, expected a column value')
  })

  it('takes names that every object has already for names', async () => {
    const rows = Array.from(
      { length: 24 },
      (_, index) => `L${index >> 2},__proto__,${(index >> 1) % 2},${(index * index) % 7}`,
    )
    const path = await file('names.csv', `lab,material,constructor,value\n${rows.join('\n')}\n`)
    const [one] = documentOf(
      await run(path, '--nest', 'constructor', '--reference', '__proto__=4:0.1', '--sigma', '__proto__=2'),
    ).materials
    expect(one!.anova.rows.map(({ source }) => source)).toEqual(['laboratory', 'constructor', 'residual'])
    expect(one!.trueness!.reference).toBe(4)
    expect(one!.assigned.sigma).toBe(2)
  })

  it('refuses a file that is not there and one that is not text', async () => {
    const absent = await run(join(folder, 'absent.csv'))
    expect(absent.status).toBe(2)
    expect(absent.stderr).toContain('the file cannot be read (ENOENT)')
    const binary = await run(await file('binary.csv', Uint8Array.from([0x6c, 0xff, 0xfe, 0x0a])))
    expect(binary.stderr).toContain('found bytes that are not UTF-8')
  })
})
