// What a thread of the pool loads in development and tests, where the sources run as they are: the build
// does without this file. A thread does not take over its parent's loader.
import { register } from 'tsx/esm/api'

register()

export const { fly, summary, survey, read } = await import('./planningWorker.ts')
