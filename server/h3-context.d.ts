import type { ViewerFacts } from './context'
import type { Upload } from './utils/read-upload'
import type { RepeatableRequest } from './write'

declare module 'h3' {
  interface H3EventContext {
    requestId?: string
    /** Who is signed in, found once a request. */
    viewer?: Promise<ViewerFacts | undefined>
    bodyText?: Promise<string>
    uploads?: Promise<Upload[]>
    repeatable?: RepeatableRequest
  }
}

export {}
