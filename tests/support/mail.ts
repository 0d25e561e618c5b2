import { setTimeout as wait } from 'node:timers/promises'
import { z } from 'zod'
import type { World } from './world'

const messages = z.object({ messages: z.array(z.object({
  subject: z.string(), messageId: z.string(), text: z.string(), html: z.string(), links: z.array(z.string()),
})) })

export type ReceivedMail = z.infer<typeof messages>['messages'][number]

/** Everything that the stand-in received for an address, oldest or newest first as it keeps them. */
export async function listMessages(world: World, address: string): Promise<ReceivedMail[]> {
  const answer: unknown = await (await fetch(`${world.standIns.inboxUrl}/__fake__/messages?to=${encodeURIComponent(address)}`)).json()
  return messages.parse(Array.isArray(answer) ? { messages: answer } : answer).messages
}

/** The first message to an address that fits, once it is there. @throws after ten seconds. */
export async function messagesTo(world: World, address: string, fits: (message: ReceivedMail) => boolean): Promise<ReceivedMail> {
  for (let tries = 0; tries < 100; tries += 1) {
    const found = (await listMessages(world, address)).find(fits)
    if (found) return found
    await wait(100)
  }
  throw new Error(`No such letter to ${address}.`)
}
