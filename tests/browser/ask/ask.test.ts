import AxeBuilder from '@axe-core/playwright'
import type { Page } from '@playwright/test'
import { DEMO_PASSWORD } from '#fakes/demo/people'
import { arrange } from '#tests/support/arrange'
import { listMessages } from '#tests/support/mail'
import type { World } from '#tests/support/world'
import { PHONE, expect, test } from '../worlds'

const FILM = 'fakes/demo/film/made/right-early-face-on.mp4'
const NOT_SHOWN = 'tests/support/film/made/mpeg4-part2.mp4'
const QUESTION = 'My low irons start left and run out of height. Where does that come from?'

async function signIn(page: Page, email: string): Promise<void> {
  await page.goto('/sign-in')
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Password', { exact: true }).fill(DEMO_PASSWORD)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page).not.toHaveURL(/sign-in/)
}

async function typeQuestion(page: Page, title: string): Promise<void> {
  await page.getByLabel('Title').fill(title)
  await page.getByLabel('Your question').fill(QUESTION)
  await page.getByRole('button', { name: 'Go on' }).click()
  await expect(page).toHaveURL(/step=film/)
}

/** Chooses a clip, keeps the swings that were suggested, and waits until it is ready. */
async function film(page: Page): Promise<void> {
  await page.getByLabel('Film or choose a clip, Face-on').setInputFiles(FILM)
  await expect(page.getByText('The brackets hold what your coach gets.')).toBeVisible({ timeout: 30_000 })
  await expectAccessible(page)
  await page.getByRole('button', { name: /^Keep th/ }).click()
}

async function goToSending(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'Go on' }).click()
  await expect(page).toHaveURL(/step=coach/)
  await page.getByRole('button', { name: 'Go on' }).click()
  await expect(page).toHaveURL(/step=send/)
}

async function confirmUrl(world: World, email: string): Promise<string> {
  const linkOf = async () => (await listMessages(world, email)).flatMap(mail => mail.links).find(link => link.includes('/confirm'))
  await expect.poll(linkOf, { timeout: 20_000 }).toBeTruthy()
  return await linkOf() ?? ''
}

async function expectAccessible(page: Page): Promise<void> {
  const { violations } = await new AxeBuilder({ page }).analyze()
  expect(violations.map(({ id, nodes }) => `${id}: ${nodes.map(node => node.html).join(' ')}`)).toEqual([])
}

const wide = (page: Page) => page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)

test('[film.4] from a coach’s own link to paid by card, with the account in between', async ({ browser, world, complaints }) => {
  test.setTimeout(180_000)
  const email = 'new.golfer@demo.turfnote.test'
  const context = await browser.newContext({ viewport: PHONE, baseURL: world.url, timezoneId: 'Europe/London' })
  const page = await context.newPage()
  await page.goto('/with/mara-lindqvist')
  await expect(page.getByText('Ask Mara Lindqvist', { exact: true })).toBeVisible()
  await typeQuestion(page, 'Low and left')
  await film(page)
  await expect(page.getByText('It waits in this browser')).toBeVisible({ timeout: 60_000 })
  await page.getByRole('group', { name: 'Swing 1' }).getByRole('radio', { name: 'Thin' }).check()
  await page.getByRole('radio', { name: 'Mat' }).check()

  // Nothing is lost when the page is closed before there is an account.
  await page.goto('/with/mara-lindqvist?step=film')
  await expect(page.getByText('It waits in this browser')).toBeVisible()
  await expect(page.getByRole('group', { name: 'Swing 1' }).getByRole('radio', { name: 'Thin' })).toBeChecked()
  expect(await wide(page)).toBeLessThanOrEqual(0)
  await expectAccessible(page)

  await goToSending(page)
  await expect(page.getByText('Answered by')).toBeVisible()
  await expectAccessible(page)
  await page.getByLabel('Your name').fill('Nora Adeyemi')
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Password', { exact: true }).fill('three words apart')
  await page.getByLabel('Date of birth').fill('1990-03-04')
  await page.getByRole('button', { name: 'Open my account' }).click()
  await expect(page.getByRole('heading', { name: 'Check your mail' })).toBeVisible()

  const second = await context.newPage()
  await second.goto(await confirmUrl(world, email))
  await second.getByRole('button', { name: 'Confirm my address' }).click()
  await expect(second).toHaveURL(/\/reviews\/new\?.*draft=/, { timeout: 20_000 })
  const pay = second.getByRole('button', { name: 'Pay £45 by card' })
  await expect(pay).toBeEnabled({ timeout: 60_000 })
  await expectAccessible(second)
  await pay.click()
  await second.getByRole('button', { name: 'Pay £45.00' }).click()
  await expect(second.getByText('Paid.')).toBeVisible({ timeout: 20_000 })
  await expect(second.getByText(/Your answer comes by/).first()).toBeVisible()
  await expect(second).toHaveURL(/\/reviews\/[0-9a-f-]{36}$/)
  await expect(second.getByText(QUESTION)).toBeVisible()

  const id = second.url().split('/').at(-1) ?? ''
  const told = arrange(world, database => database.prepare(`
    select swings.contact, swings.surface, reviews.chosen_coach_id is not null as isForOneCoach
    from swings join clips on clips.id = swings.clip_id join reviews on reviews.id = clips.review_id
    where reviews.id = ? order by swings.number`).all(id))
  expect(told[0]).toEqual({ contact: 'thin', surface: 'mat', isForOneCoach: 1 })
  await expect.poll(async () => (await listMessages(world, email)).map(mail => mail.subject).join('\n')).toMatch(/receipt|paid/i)
  expect(complaints).toEqual([])
})

test('[film.4] a declined card loses nothing, and the same review is paid afterwards', async ({ browser, world, complaints }) => {
  test.setTimeout(180_000)
  const page = await (await browser.newContext({ viewport: PHONE, baseURL: world.url, timezoneId: 'Europe/London' })).newPage()
  await signIn(page, 'student3@demo.turfnote.test')
  await page.goto('/reviews/new')
  await typeQuestion(page, 'A card that is declined')
  await film(page)
  await expect(page.getByText('Taken.')).toBeVisible({ timeout: 60_000 })
  await expectAccessible(page)
  await goToSending(page)
  await page.getByRole('radio', { name: /^Pay £45 by card/ }).check()
  await page.getByRole('button', { name: 'Pay £45 by card' }).click()
  await page.getByRole('button', { name: 'Pay with a card that is declined' }).click()
  await expect(page.getByText('The card was declined.')).toBeVisible()
  await page.getByRole('button', { name: 'Walk away' }).click()
  await expect(page.getByText('Nothing was charged.')).toBeVisible({ timeout: 20_000 })
  await page.getByRole('link', { name: 'Back to sending' }).click()
  await expect(page).toHaveURL(/step=send/)
  await page.getByRole('radio', { name: /^Pay £45 by card/ }).check()
  await page.getByRole('button', { name: 'Pay £45 by card' }).click()
  await page.getByRole('button', { name: 'Pay £45.00' }).click()
  await expect(page.getByText('Paid.')).toBeVisible({ timeout: 20_000 })
  await expect(page.getByRole('heading', { level: 1, name: /Your answer comes by/ })).toBeVisible()

  await page.getByRole('button', { name: 'Take it back' }).click()
  await expect(page.getByRole('dialog')).toContainText('a single one as money on the card')
  await page.getByRole('dialog').getByRole('button', { name: 'Keep it' }).click()
  expect(complaints).toEqual([])
})

test('[film.4] a film that cannot be used is explained before anything is sent', async ({ browser, world, complaints }) => {
  const page = await (await browser.newContext({ viewport: PHONE, baseURL: world.url })).newPage()
  await signIn(page, 'student2@demo.turfnote.test')
  await page.goto('/reviews/new')
  await typeQuestion(page, 'An old file')
  await page.getByLabel('Film or choose a clip, Face-on').setInputFiles(NOT_SHOWN)
  const clip = page.getByRole('region', { name: 'Face-on clip' })
  await expect(clip).toContainText('This film is stored in a way that many browsers cannot show.')
  await expect(clip).toContainText('Nothing was sent.')
  await expect(clip.getByLabel('Choose another clip, Face-on')).toBeAttached()
  expect(complaints).toEqual([])
})
