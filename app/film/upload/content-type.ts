/** The kinds of film the server takes, as it names them. */
export type FilmContentType = 'video/mp4' | 'video/quicktime' | 'video/webm'

const BY_ENDING: Record<string, FilmContentType> = {
  mp4: 'video/mp4',
  m4v: 'video/mp4',
  mov: 'video/quicktime',
  qt: 'video/quicktime',
  webm: 'video/webm',
}

/**
 * What kind of film a chosen file says it is. Some phones leave the type empty or name a cousin (`video/x-m4v`), so
 * the ending of the name helps; what the file really holds is for the server to read.
 * @returns undefined when it says neither
 */
export function findFilmContentType(fileName: string, type: string): FilmContentType | undefined {
  const named = Object.values(BY_ENDING).find(known => known === type.toLowerCase())
  if (named !== undefined) return named
  const ending = fileName.toLowerCase().split('.').at(-1) ?? ''
  return BY_ENDING[ending]
}
