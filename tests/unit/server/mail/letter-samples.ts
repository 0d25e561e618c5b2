import type { LetterData, LetterName } from '#server/features/mail/letters/index'

const studioName = 'Northfield Studio'
const token = 'q8Yw2vJt0mX5bRkPz7uHc4LsNfEaD1Gi_6oT9xVhB3K'
const link = (path: string) => `https://lessons.northfield.test${path}`

/** One fit set of data for each letter; people and places are invented. */
export const letterSamples: { [N in LetterName]: LetterData<N> } = {
  'confirm-address': {
    studioName,
    name: 'Joel Okafor',
    confirmUrl: link(`/confirm?token=${token}`),
    validUntilText: 'Wed 20 May, 09:15',
  },
  'address-already-known': {
    studioName,
    name: 'Joel Okafor',
    signInUrl: link('/sign-in'),
    forgotUrl: link('/forgot'),
  },
  'forgotten-password': {
    studioName,
    name: 'Joel Okafor',
    resetUrl: link(`/reset?token=${token}&from=letter`),
    validUntilText: 'Tue 19 May, 10:15',
  },
  'password-changed': {
    studioName,
    name: 'Joel Okafor',
    whenText: 'Tue 19 May, 09:20',
    forgotUrl: link('/forgot'),
  },
  'invitation': {
    studioName,
    inviterName: 'Ines Carvalho',
    role: 'coach',
    inviteUrl: link(`/invite?token=${token}`),
    validUntilText: 'Tue 26 May, 09:00',
  },
  'money-back': {
    studioName,
    readerName: 'Joel Okafor',
    amountText: '£45',
    reason: 'paid-twice',
    orderId: '0196f0a2-7c11-7b52-9d0e-3f4f5b8a1c22',
    reviewsUrl: link('/reviews'),
  },
  'receipt': {
    studioName,
    readerName: 'Joel Okafor',
    offerName: 'Five reviews',
    amountText: '£195',
    paidText: 'Thu 21 May, 17:00',
    orderId: '0196f0a2-7c11-7b52-9d0e-3f4f5b8a1c22',
    reviewsUrl: link('/reviews'),
  },
  'review-sent': {
    studioName,
    readerName: 'Joel Okafor',
    studentName: 'Joel Okafor',
    coachName: 'Mara Lindqvist',
    questionTitle: 'Heavy 7-irons, always two in a row',
    promiseText: 'Thu 21 May, 17:00',
    reviewUrl: link('/reviews/0196f0a2-7c11-7b52-9d0e-3f4f5b8a1c22'),
    isGuardianCopy: false,
  },
  'review-waiting': {
    studioName,
    studentName: 'Joel Okafor',
    coachName: 'Mara Lindqvist',
    questionTitle: 'Heavy 7-irons, always two in a row',
    promiseText: 'Thu 21 May, 17:00',
    reviewUrl: link('/desk/0196f0a2-7c11-7b52-9d0e-3f4f5b8a1c22'),
  },
  'answered': {
    studioName,
    readerName: 'Joel Okafor',
    studentName: 'Joel Okafor',
    coachName: 'Mara Lindqvist',
    title: 'Why the heavy ones come in twos',
    firstLines: 'Your set-up and the top of your swing are in good order, so we leave them alone.\n\nEverything that costs you contact happens in the last quarter second.',
    oneChange: 'keep the grip end travelling past the ball before the wrists let go.',
    reviewUrl: link('/reviews/0196f0a2-7c11-7b52-9d0e-3f4f5b8a1c22'),
    isGuardianCopy: false,
  },
}
