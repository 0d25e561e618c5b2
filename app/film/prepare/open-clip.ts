import type { ClipFacts } from './clip-facts'
import { FramePicker } from './frame-picker'
import type { ReadClip } from './read-clip'
import { readClip } from './read-clip'

/** A clip that was chosen, read, and held open for looking at. */
export interface OpenedClip {
  file: File
  facts: ClipFacts
  /** For `showFrame` and `readFrameFacts`. */
  picker: FramePicker
  /** Frees the decoder and the pictures it holds; the clip can be opened again. */
  close(): void
}

/**
 * Reads a chosen file on this device. Nothing leaves it.
 *
 * @throws ClipProblem `not-video`, `unreadable` or `no-frames`
 */
export async function openClip(file: File): Promise<OpenedClip> {
  const clip: ReadClip = await readClip(file)
  const picker = new FramePicker(clip)
  return {
    file,
    facts: clip.facts,
    picker,
    close() {
      picker.close()
      clip.input.dispose()
    },
  }
}
