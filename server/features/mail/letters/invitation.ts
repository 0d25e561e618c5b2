import type { Letter } from '../layout'
import { firstNameOf, layOut } from '../layout'

export interface InvitationData {
  studioName: string
  inviterName: string
  role: 'coach' | 'owner'
  inviteUrl: string
  validUntilText: string
}

const ROLES: Record<InvitationData['role'], { title: string, work: string }> = {
  coach: { title: 'a coach', work: 'Coaches answer the reviews that students send: they read the film, measure it and write the letter.' },
  owner: { title: 'an owner', work: 'Owners set offers, prices and promises, invite people and watch that answers are on time.' },
}

/** To someone the studio wants as a coach or owner; they have no account yet, so the letter uses no name. */
export function invitationLetter(data: InvitationData): Letter {
  const { title, work } = ROLES[data.role]
  return layOut({
    subject: `${data.inviterName} invites you to ${data.studioName}`,
    preheader: `Join as ${title}. The link works until ${data.validUntilText}.`,
    heading: `Join ${data.studioName} as ${title}`,
    blocks: [
      { kind: 'paragraph', text: `${data.inviterName} invites you to join ${data.studioName} as ${title}. ${work}` },
      { kind: 'button', label: 'See the invitation', url: data.inviteUrl },
      { kind: 'paragraph', text: `The link is yours alone and works once, until ${data.validUntilText}. If you do not know ${firstNameOf(data.inviterName)}, you need not do anything.` },
    ],
    studioName: data.studioName,
    why: `You get this letter because ${data.inviterName} gave your address.`,
  })
}
