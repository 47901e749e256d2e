// What may import what. Every rule says in one sentence what to do instead; tests/rules/imports.test.ts
// plants a violation of each.

const COMMANDS = '^(lib|db)/commands/'
const npm = (...names) => `node_modules/(${names.map((name) => name.replace('/', '\\/')).join('|')})(/|$)`

// What could name a laboratory, or tell by its manner who wrote something.
const QUERIES_OF_THE_VAULT =
  '^db/queries/(laboratories|mail|mail-states|participations|returns|uploads)\\.ts$'

/** @type {import('dependency-cruiser').IConfiguration} */
const config = {
  forbidden: [
    {
      name: 'no-cycles',
      comment: 'Move what both files need into a third that imports neither.',
      severity: 'error',
      from: {},
      to: { circular: true },
    },
    {
      name: 'nothing-unresolved',
      comment: 'Write the file, or add the package to package.json.',
      severity: 'error',
      from: {},
      to: { couldNotResolve: true },
    },
    {
      name: 'product-without-development-packages',
      comment: 'Move the package to dependencies, or the code to tests, fakes or a command.',
      severity: 'error',
      from: { path: '^(app|db|lib|migrations)/', pathNot: COMMANDS },
      to: { dependencyTypes: ['npm-dev'], dependencyTypesNot: ['type-only'] },
    },
    {
      name: 'app-decides-nothing',
      comment: 'Call a use case; it authorises, reads and writes.',
      severity: 'error',
      from: { path: '^app/' },
      to: { path: ['^db/', npm('kysely', 'pg', 'pg-boss')] },
    },
    {
      name: 'statistics-stand-alone',
      comment: 'Hand the numbers in as arguments; the core imports nothing of ours but itself.',
      severity: 'error',
      from: { path: '^lib/statistics/' },
      to: { path: '^(app|db|fakes|lib|migrations|tests)/', pathNot: '^lib/statistics/' },
    },
    {
      name: 'statistics-few-packages',
      comment: 'The core uses jstat, mathjs, pure-rand and @stdlib alone.',
      severity: 'error',
      from: { path: '^lib/statistics/' },
      to: { path: 'node_modules/', pathNot: npm('jstat', 'mathjs', 'pure-rand', '@stdlib/[^/]+') },
    },
    {
      name: 'distributions-behind-one-door',
      comment: 'Call lib/statistics/distributions, which knows where each library is accurate.',
      severity: 'error',
      from: { pathNot: '^(lib/statistics/distributions/|tests/)' },
      to: { path: npm('jstat', 'pure-rand', '@stdlib/[^/]+') },
    },
    {
      name: 'mathjs-behind-two-doors',
      comment: 'Use lib/statistics/distributions, or lib/statistics/units.ts for units.',
      severity: 'error',
      from: { pathNot: '^(lib/statistics/distributions/|lib/statistics/units\\.ts$|tests/)' },
      to: { path: npm('mathjs') },
    },
    {
      name: 'domain-is-pure',
      comment: 'Rules take plain values; what reads or writes belongs to a use case.',
      severity: 'error',
      from: { path: '^lib/domain/' },
      to: {
        path: [
          '^(app|db|fakes|migrations|tests)/',
          '^lib/(?!domain/|statistics/)',
          npm('kysely', 'pg', 'pg-boss', 'next', 'next-auth', 'react', 'react-dom', 'nodemailer', 'exceljs'),
        ],
      },
    },
    {
      name: 'anonymous-knows-no-names',
      comment: 'Read what the reader login may see; a name is a use case of someone who may know it.',
      severity: 'error',
      from: { path: '^db/anonymous/' },
      to: {
        path: '^(app|db|fakes|lib|migrations|tests)/',
        pathNot: '^(db/anonymous/|db/connection\\.ts$|db/tables\\.ts$|lib/domain/)',
      },
    },
    {
      name: 'committee-and-public-reach-no-vault',
      comment:
        'Go through a use case that reads db/anonymous; not even by way of another file may the vault be reached.',
      severity: 'error',
      from: { path: ['^app/\\(public\\)/', '^app/\\(work\\)/committee/', '^db/anonymous/'] },
      to: { path: QUERIES_OF_THE_VAULT, reachable: true },
    },
    {
      name: 'queries-know-no-layer-above',
      comment: 'A query takes what it needs as arguments; only lib/domain lies below it.',
      severity: 'error',
      from: { path: '^db/(queries/|connection\\.ts$|tables\\.ts$)' },
      to: { path: ['^(app|fakes|migrations|tests)/', '^lib/(?!domain/)', '^db/(anonymous|commands|seed)/'] },
    },
    {
      name: 'framework-stays-outside',
      comment: 'Only app, lib/web and lib/auth know Next.js; give the rest what it needs as plain values.',
      severity: 'error',
      from: {
        pathNot: '^(app/|lib/web/|lib/auth/|proxy\\.ts$|next\\.config\\.mjs$|next-env\\.d\\.ts$|tests/)',
      },
      to: { path: npm('next', 'next-auth') },
    },
    {
      name: 'use-cases-know-no-door',
      comment: 'A use case serves pages, jobs and commands alike; what belongs to one of them stays there.',
      severity: 'error',
      from: { path: '^lib/use-cases/' },
      to: {
        path: [
          '^(app|fakes|migrations|tests)/',
          '^lib/(auth|commands|web)/',
          '^lib/(wiring|config)\\.ts$',
          npm('pg', 'pg-boss', 'react', 'nodemailer', 'exceljs'),
        ],
      },
    },
    {
      name: 'sheets-stand-below',
      comment: 'Give the workbook its values; reading them is the use case’s part.',
      severity: 'error',
      from: { path: '^lib/spreadsheet/' },
      to: { path: ['^(app|db|fakes|migrations|tests)/', '^lib/(?!domain/|spreadsheet/)'] },
    },
    {
      name: 'one-writer-of-workbooks',
      comment: 'Only lib/spreadsheet writes workbooks, and uploads are never read by this package.',
      severity: 'error',
      from: { pathNot: '^(lib/spreadsheet/|tests/)' },
      to: { path: npm('exceljs') },
    },
    {
      name: 'migrations-describe-the-past',
      comment: 'Write the value out; a constant that changes later would change the past.',
      severity: 'error',
      from: { path: '^migrations/' },
      to: { path: ['^(app|db|fakes|lib|tests)/', 'node_modules/'], pathNot: npm('kysely') },
    },
    {
      name: 'roots-are-not-imported',
      comment: 'Commands and the worker join the parts; nothing of the product leans on them.',
      severity: 'error',
      from: { path: '^(app|db|fakes|lib|migrations)/', pathNot: COMMANDS },
      to: { path: [COMMANDS, '^lib/jobs/worker\\.ts$'] },
    },
    {
      name: 'demonstration-stays-in-its-place',
      comment: 'Only the commands fill a database with the demonstration; a real run never has it in memory.',
      severity: 'error',
      from: { pathNot: '^(lib/commands/|db/commands/|db/seed/|tests/)' },
      to: { path: '^db/seed/' },
    },
    {
      name: 'nothing-imports-fakes',
      comment: 'A fake is a server of its own; talk to it through the port it stands in for.',
      severity: 'error',
      from: { pathNot: '^(fakes|tests)/' },
      to: { path: '^fakes/' },
    },
    {
      name: 'nothing-imports-tests',
      comment: 'Move what the product needs out of tests.',
      severity: 'error',
      from: { pathNot: '^(tests/|vitest\\.config\\.ts$|playwright\\.config\\.ts$)' },
      to: { path: '^tests/' },
    },
  ],
  options: {
    doNotFollow: { path: 'node_modules' },
    exclude: { path: '^\\.(next|data)/' },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: 'tsconfig.json' },
    enhancedResolveOptions: {
      exportsFields: ['exports'],
      conditionNames: ['import', 'require', 'node', 'default', 'types'],
    },
  },
}

export default config
