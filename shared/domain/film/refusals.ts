/** Why a film is not taken; stored with the clip and shown to whoever sent it. */
export const FILM_REFUSALS = {
  'not-video': {
    title: 'This file is not a film.',
    whatToDo: 'Choose the video itself, as MP4, MOV or WebM. A photograph, a recording without picture or a zipped folder cannot be measured.',
  },
  'unreadable': {
    title: 'This film cannot be read.',
    whatToDo: 'The file is cut short or damaged. Check that it plays to the end on your phone, save it there as a new video, and send that one.',
  },
  'no-frames': {
    title: 'This film has no moving picture.',
    whatToDo: 'The file holds one frame or none. Check that it plays on your phone, then send it again or choose another film.',
  },
  'codec-not-shown': {
    title: 'This film is stored in a way that many browsers cannot show.',
    whatToDo: 'Your coach may see nothing. On an iPhone open Settings, Camera, Formats and choose Most Compatible, then film again at 1080p and 120 frames a second. On an Android phone turn off "High efficiency video" or "Store videos efficiently" in the camera settings, then film again.',
  },
  'too-long': {
    title: 'This film is longer than a minute.',
    whatToDo: 'Keep the swings and cut the rest: a second or two before each one starts and after it ends is enough. Then send it again.',
  },
  'too-large': {
    title: 'This film is over 500 MB.',
    whatToDo: 'Keep only the swings, or film at 1080p instead of 4K, and send it again.',
  },
  'webm-too-large': {
    title: 'This film is over 32 MB, too large for WebM.',
    whatToDo: 'A WebM file can only be checked by reading all of it. Save the film as MP4, or keep fewer swings, and send it again.',
  },
  'too-few-frames-a-second': {
    title: 'This film has fewer than 24 frames a second.',
    whatToDo: 'The club moves more than a metre between its frames, so impact cannot be seen. Film again at 120 frames a second or more, which phones call slow motion, in good light and without time-lapse.',
  },
  'has-location': {
    title: 'This film still says where it was taken.',
    whatToDo: 'Nothing of it was kept. Send it from the page that asks for your film, which removes the place first, or share it from your phone with location turned off.',
  },
  'has-sound': {
    title: 'This film still has its sound.',
    whatToDo: 'Nothing of it was kept, because voices of others may be on it. Send it from the page that asks for your film, which removes the sound first, or mute it on your phone and save it as a new video.',
  },
  'took-too-long': {
    title: 'This film took too long to read.',
    whatToDo: 'Save it as a new video on your phone, which writes its tables afresh, and send that one.',
  },
} as const satisfies Record<string, FilmRefusalWords>

export interface FilmRefusalWords {
  title: string
  whatToDo: string
}

export type FilmRefusal = keyof typeof FILM_REFUSALS

/** True for a stored reason that this version knows words for. */
export function isFilmRefusal(value: string): value is FilmRefusal {
  return Object.hasOwn(FILM_REFUSALS, value)
}
