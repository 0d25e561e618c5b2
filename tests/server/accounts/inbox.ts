import { setTimeout as wait } from 'node:timers/promises'
import { z } from 'zod'
import type { World } from '#tests/support/world'

const mailList = z.array(z.object({ subject: z.string(), links: z.array(z.string()), messageId: z.string() }))

export type Mail = z.output<typeof mailList>[number]

export async function mailsTo(world: World, address: string): Promise<Mail[]> {
  const response = await fetch(`http://127.0.0.1:${world.addresses.inboxPort}/__fake__/messages?to=${encodeURIComponent(address)}`)
  return mailList.parse(await response.json())
}

/** Waits until `address` has `count` mails, since they leave after the answer. */
export async function untilMails(world: World, address: string, count: number): Promise<Mail[]> {
  const deadlineMs = Date.now() + 10_000
  for (;;) {
    const mails = await mailsTo(world, address)
    if (mails.length >= count) return mails
    if (Date.now() > deadlineMs) throw new Error(`${address} has ${mails.length} mails, not ${count}.`)
    await wait(50)
  }
}

/** The secret in the link of the newest mail; the mail's page and token stand in its address. */
export async function tokenFrom(world: World, address: string, page: string, count: number): Promise<string> {
  const links = (await untilMails(world, address, count)).flatMap(mail => mail.links).filter(link => new URL(link).pathname === page)
  const token = new URL(links.at(-1) ?? world.url).searchParams.get('token')
  if (token === null) throw new Error(`No mail to ${address} has a link to ${page}.`)
  return token
}
