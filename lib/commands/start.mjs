import { installPackages } from './install-packages.mjs'

installPackages()
process.chdir(new URL('../..', import.meta.url).pathname)
const { register } = await import('tsx/esm/api')
register()
await import('./start.ts')
