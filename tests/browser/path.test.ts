import type { Browser, Page } from '@playwright/test'
import { DEMO_PASSWORD } from '#fakes/demo/people'
import { listMessages } from '#tests/support/mail'
import { FILM } from '#tests/support/path'
import type { World } from '#tests/support/world'
import { DESK, PHONE, expect, test } from './worlds'

const TITLE = 'Heavy and thin in the same round'
const ONE_CHANGE = 'Keep the grip end travelling past the ball before the wrists let go.'

async function signIn(browser: Browser, world: World, email: string, viewport: { width: number, height: number }): Promise<Page> {
  const context = await browser.newContext({ viewport, baseURL: world.url, timezoneId: 'Europe/London' })
  const page = await context.newPage()
  await page.goto('/sign-in')
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Password', { exact: true }).fill(DEMO_PASSWORD)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page).not.toHaveURL(/sign-in/)
  return page
}

async function askAsStudent(page: Page): Promise<void> {
  await page.getByRole('link', { name: 'Ask a coach' }).first().click()
  await page.getByLabel('Title').fill(TITLE)
  await page.getByLabel('Your question').fill('With my irons I hit one heavy and the next one thin. Why?')
  await page.getByRole('button', { name: 'Go on' }).click()
  await page.getByLabel('Film or choose a clip, Face-on').setInputFiles(FILM)
  await page.getByRole('button', { name: /^Keep th/ }).click()
  await expect(page.getByRole('region', { name: 'Face-on clip' })).toContainText('Taken.', { timeout: 20_000 })
  await page.getByRole('button', { name: 'Go on' }).click()
  await page.getByRole('radio', { name: /First who is free/i }).check()
  await page.getByRole('button', { name: 'Go on' }).click()
}

async function answerAsCoach(page: Page): Promise<void> {
  await page.getByRole('link', { name: 'Joel Osei' }).click()
  await page.getByRole('button', { name: 'Take up' }).click()
  await page.getByLabel('What to leave alone').fill('Your set-up is in good order, so we leave it alone.')
  await page.getByLabel('What I saw').fill('With the shaft level the grip end hangs **behind** the ball.')
  await page.getByLabel('Why it happens').fill('The hands slow down before the ball.')
  await page.getByLabel('One change').fill(ONE_CHANGE)
  await page.getByLabel('Drill').fill('Low punch, level to level')
  await page.getByLabel('Dose').fill('4 sessions a week, 10 minutes')
  await page.getByLabel('Steps').fill('1. Handle ahead of the ball.\n2. Strike the turf.')
  await page.getByLabel('Take care').fill('Warm up first. Stop if your back hurts.')
  await page.getByRole('button', { name: 'Send to Joel' }).click()
  await expect(page).toHaveURL(/\/desk$/)
}

test('[house.2] a student asks on a phone, a coach answers at a desk, the letter arrives', async ({ browser, world, complaints }) => {
  const student = await signIn(browser, world, 'student@demo.turfnote.test', PHONE)
  await askAsStudent(student)
  await expect(student.getByText(/Answered by/)).toBeVisible()
  await student.getByRole('button', { name: /^Send/ }).click()
  await expect(student).toHaveURL(/\/reviews\/[0-9a-f-]{36}$/)
  await expect(student.getByRole('heading', { level: 1 })).toBeVisible()
  const reviewUrl = student.url()

  const coach = await signIn(browser, world, 'coach@demo.turfnote.test', DESK)
  await expect(coach).toHaveURL(/\/desk$/)
  await answerAsCoach(coach)

  await expect.poll(async () => (await listMessages(world, 'student@demo.turfnote.test')).map(mail => mail.subject)).toContain('Mara has answered')
  const mail = (await listMessages(world, 'student@demo.turfnote.test')).find(message => message.subject === 'Mara has answered')
  expect(mail?.text).toContain(ONE_CHANGE)
  expect(mail?.links).toContain(reviewUrl)

  const inbox = await (await browser.newContext({ viewport: PHONE })).newPage()
  await inbox.goto(world.standIns.inboxUrl)
  await expect(inbox.getByText('Mara has answered').first()).toBeVisible()

  await student.goto(mail?.links.find(link => link === reviewUrl) ?? '/')
  await expect(student.getByText(ONE_CHANGE)).toBeVisible()
  await expect(student.getByText('Low punch, level to level')).toBeVisible()
  await expect(student.locator('strong', { hasText: 'behind' })).toBeVisible()
  expect(await student.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)).toBeLessThanOrEqual(0)
  expect(complaints).toEqual([])
})
