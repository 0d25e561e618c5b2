import type { StageName } from './outcome'
import { TAGS } from './tags'

export interface Options {
  /** Only tests that carry the tag, then a line for each of its numbers. */
  tag: string | undefined
  stages: readonly StageName[]
}

/** In the order in which they run. */
export const STAGE_NAMES = ['lint', 'types', 'unit', 'components', 'build', 'server', 'browser'] as const satisfies readonly StageName[]

const USAGE = `npm test -- [--tag <${Object.keys(TAGS).join('|')}>] [stage …]\nStages: ${STAGE_NAMES.join(', ')}; all, unless named.`

/** What was asked for is not there; the message says what is. */
export class BadOptions extends Error {
  override name = 'BadOptions'
}

/** @throws BadOptions */
export function readOptions(given: readonly string[]): Options {
  const rest = [...given]
  const tagAt = rest.indexOf('--tag')
  const tag = tagAt === -1 ? undefined : rest.splice(tagAt, 2)[1]
  if (tagAt !== -1 && (tag === undefined || !(tag in TAGS))) throw new BadOptions(`Unknown tag: ${tag ?? 'none was named'}.\n${USAGE}`)
  const unknown = rest.filter(name => !isStageName(name))
  if (unknown.length > 0) throw new BadOptions(`Unknown: ${unknown.join(', ')}.\n${USAGE}`)
  return { tag, stages: stagesFor(rest.filter(isStageName), tag) }
}

function stagesFor(named: StageName[], tag: string | undefined): StageName[] {
  // Lint and types carry no tags.
  const wanted = named.length > 0 ? named : STAGE_NAMES.filter(name => tag === undefined || (name !== 'lint' && name !== 'types'))
  const needsBuild = wanted.includes('server') || wanted.includes('browser')
  return STAGE_NAMES.filter(name => wanted.includes(name) || (name === 'build' && needsBuild))
}

function isStageName(name: string): name is StageName {
  return STAGE_NAMES.some(stage => stage === name)
}
