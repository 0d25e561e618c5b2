/** What the page asks of the worker that keeps a film, or tells it. */
export type ToKeeper
  = | { kind: 'keep', clipId: string, file: Blob, partBytes: number }
    /** The store has these. */
    | { kind: 'arrived', numbers: number[] }
    | { kind: 'check', clipId: string, number: number }

/** Why a film does not lie on this device: no room, or it is another file than the one begun before. */
export type NotKept = 'no-room' | 'other-file'

export type FromKeeper
  /** The file is the one begun before, or nothing speaks against it. */
  = | { kind: 'same' }
    | { kind: 'whole' }
    | { kind: 'not-kept', reason: NotKept }
    /** `bytes` is undefined when they are not what was put there. */
    | { kind: 'checked', number: number, bytes: Blob | undefined }
