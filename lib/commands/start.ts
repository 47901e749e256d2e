import { ConfigurationError, namesOutsideServices } from '@/lib/config'
import { startOnOutsideServices } from './start-on-outside-services'
import { startPrivately } from './start-privately'

const root = process.cwd()

try {
  process.exitCode = namesOutsideServices(process.env)
    ? await startOnOutsideServices(root)
    : await startPrivately(root)
} catch (failure) {
  // What a person can mend is told in words; a stack would only hide it.
  console.error(failure instanceof ConfigurationError ? failure.message : failure)
  process.exitCode = 1
}
process.exit()
