import AxeBuilder from '@axe-core/playwright'
import { DEMO_PASSWORD } from '#fakes/demo/people'
import { PHONE, expect, test } from '../worlds'

test('[film.4] a student says once what every coach should know, in inches or centimetres', async ({ browser, world, complaints }) => {
  const page = await (await browser.newContext({ viewport: PHONE, baseURL: world.url })).newPage()
  await page.goto('/sign-in?to=/profile')
  await page.getByLabel('E-mail').fill('student2@demo.turfnote.test')
  await page.getByLabel('Password', { exact: true }).fill(DEMO_PASSWORD)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await expect(page).toHaveURL(/\/profile$/)

  await page.getByLabel('Handicap').fill('18.4')
  await page.getByRole('checkbox', { name: 'Range, off mats' }).check()
  await page.getByLabel('Add a club').selectOption('7-iron')
  const length = page.getByLabel('Length of the 7-iron')
  await expect(length).toHaveAttribute('placeholder', '37')
  await length.fill('375')
  await page.getByRole('button', { name: 'Keep it' }).click()
  await expect(page.getByText('A club other than a putter is at most 48 inches')).toBeVisible()
  await length.fill('37,5')
  await page.getByLabel('Carry of the 7-iron').fill('150')
  await page.getByRole('button', { name: 'Keep it' }).click()
  await expect(page.getByText('Kept. Your coach reads it with every review.')).toBeVisible()
  expect((await new AxeBuilder({ page }).analyze()).violations).toEqual([])

  await page.reload()
  await expect(page.getByLabel('Handicap')).toHaveValue('18.4')
  await expect(length).toHaveValue('37.5')
  await page.getByRole('radio', { name: 'cm' }).check()
  await expect(length).toHaveValue('95.25')
  await page.getByRole('radio', { name: 'metres' }).check()
  await expect(page.getByLabel('Carry of the 7-iron')).toHaveValue('137.16')
  expect(await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth)).toBeLessThanOrEqual(0)
  // A refusal of the studio's is an ordinary answer; the browser notes it all the same.
  expect(complaints.filter(complaint => !complaint.includes('422'))).toEqual([])
})
