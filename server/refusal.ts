import type { FieldErrors } from '#shared/types/answers'

/** Why a request is turned down; `toHttpError` alone knows which status each is. */
export type RefusalKind
  = 'malformed' | 'not-signed-in' | 'not-allowed' | 'not-found' | 'wrong-moment' | 'gone' | 'too-large' | 'wrong-kind'
    | 'invalid' | 'too-many' | 'unavailable'

/**
 * A named "no" that the reader can act on. Features declare theirs in `x.errors.ts`; anything else that is thrown is a fault.
 * `code` is kebab-case and stable; `message` is for the person; `fields` names what to correct.
 */
export class Refusal extends Error {
  override name = 'Refusal'
  constructor(
    readonly kind: RefusalKind,
    readonly code: string,
    message: string,
    readonly fields?: FieldErrors,
    readonly retryAfterSeconds?: number,
  ) {
    super(message)
  }
}

/** What a person may not see does not exist for them. */
export function notFound(what: string): Refusal {
  return new Refusal('not-found', 'not-found', `There is no such ${what}, or it is not yours to see.`)
}

export function invalidFields(fields: FieldErrors): Refusal {
  return new Refusal('invalid', 'invalid-fields', 'Some of this needs another look.', fields)
}
