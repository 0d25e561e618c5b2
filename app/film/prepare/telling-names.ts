/** Names under which phones write where and with what a film was taken. The server looks for the same before it takes one. */

// `©xyz` is QuickTime's and Android's place in user data, `loci` that of 3GPP (TS 26.244, 8.10); keys are spelt out.
const LOCATION_NAMES = /^(?:\u00A9xyz|loci)$|location|iso6709|gps|latitude|longitude|geotag/i
const DEVICE_NAMES = /^(?:\u00A9mak|\u00A9mod|\u00A9swr|manu|modl)$|(?:^|[._])(?:make|model|manufacturer|software|device)\b|android\.version/i
const LOCATION_IN_BLOB = /GPSL(?:at|ong)itude|exif:GPS|location\.ISO6709/
const TIMED_LOCATION = /location|gps/i
const CAMERA_MOTION = ['camm', 'gpmd', 'rtmd']

/** True for the name of a tag that holds a place. */
export function tellsLocation(name: string): boolean {
  return LOCATION_NAMES.test(name)
}

/** True for the name of a tag that holds make, model or system of the phone. */
export function tellsDevice(name: string): boolean {
  return DEVICE_NAMES.test(name)
}

/** True for a block of another format (XMP, maker notes) with places inside; `text` is its bytes as Latin-1. */
export function holdsLocation(text: string): boolean {
  return LOCATION_IN_BLOB.test(text)
}

/** True for a track beside picture and sound that follows where the camera was. */
export function tracksLocation(format: string, description: string): boolean {
  return CAMERA_MOTION.includes(format) || TIMED_LOCATION.test(description)
}
