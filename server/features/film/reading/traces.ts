/** What a film still tells about the person, gathered while its boxes or elements are walked. */
export class Traces {
  hasSound = false
  hasLocation = false
  readonly #deviceTags = new Set<string>()

  /** Notes a tag by its name: a key of QuickTime metadata, a four-letter box, a Matroska tag. */
  noteName(name: string): void {
    if (LOCATION_NAMES.test(name))
      this.hasLocation = true
    if (DEVICE_NAMES.test(name))
      this.#deviceTags.add(name)
  }

  /** Notes places inside a block of another format (XMP, maker notes), which carries names of its own. */
  noteBlob(bytes: Uint8Array): void {
    if (LOCATION_IN_BLOB.test(Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength).toString('latin1')))
      this.hasLocation = true
  }

  /** A track beside picture and sound, by its four letters: camera motion tracks are written with positions in them. */
  noteTimedMetadata(format: string, description: Uint8Array): void {
    if (['camm', 'gpmd', 'rtmd'].includes(format))
      this.hasLocation = true
    if (TIMED_LOCATION.test(Buffer.from(description).toString('latin1')))
      this.hasLocation = true
  }

  get deviceTags(): string[] {
    return [...this.#deviceTags].sort()
  }
}

// `©xyz` is QuickTime's and Android's place in user data, `loci` that of 3GPP (TS 26.244, 8.10); keys are spelt out.
const LOCATION_NAMES = /^(?:\u00A9xyz|loci)$|location|iso6709|gps|latitude|longitude|geotag/i
const DEVICE_NAMES = /^(?:\u00A9mak|\u00A9mod|\u00A9swr|manu|modl)$|(?:^|[._])(?:make|model|manufacturer|software|device)\b|android\.version/i
const LOCATION_IN_BLOB = /GPSL(?:at|ong)itude|exif:GPS|location\.ISO6709/
const TIMED_LOCATION = /location|gps/i
