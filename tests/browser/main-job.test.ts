import { expect, test, type Browser, type Locator, type Page } from '@playwright/test'
import { signInAs, demoSignIn } from './sign-in-as.ts'

/** The whole main job through the real server and MariaDB, one page after the other, as each role would do it. */
test.describe.configure({ mode: 'serial' })

const MACHINE = 'F3'
const GROSS = [98.2, 99.1, 97.6, 98.8, 99.4, 98.0]

async function pageOf(browser: Browser, role: string): Promise<Page> {
  const page = await (await browser.newContext()).newPage()
  await signInAs(page, role)
  return page
}

/** Chooses the first option that reads like this, once it is there. */
async function choose(select: Locator, like: RegExp): Promise<void> {
  const label = await select.locator('option', { hasText: like }).first().textContent()
  await select.selectOption({ label: label ?? '' })
}

/** Signs in the dialog that is open, with the role's own pass-phrase. */
async function sign(page: Page, role: string, reason?: string): Promise<void> {
  if (reason !== undefined) await page.getByLabel('Reason').fill(reason)
  await page.getByLabel('Your pass-phrase').fill(demoSignIn(role).password)
  await page.getByRole('button', { name: 'Sign', exact: true }).click()
}

test('the fitter records a changeover, and a second person checks it', async ({ browser }) => {
  const page = await pageOf(browser, 'fitter')
  await page.getByRole('button', { name: 'Begin a tooling change' }).click()
  await expect(page.getByRole('button', { name: 'Begin the work' })).toBeDisabled()
  await page.getByText('have read this and do the work accordingly').click()
  await choose(page.getByLabel('Machine', { exact: true }), /^F3/)
  await choose(page.getByLabel('Tooling fitted', { exact: true }), /^T3/)
  await choose(page.getByLabel('For batch', { exact: true }), /^AF/)
  await page.getByLabel('Steps, one a line').fill('Isolate and lock out\nFit the dosing disc')
  await page.getByRole('button', { name: 'Begin the work' }).click()
  await expect(page.getByText('0 of 2 steps are done.')).toBeVisible()
  await page.getByText('Isolate and lock out', { exact: true }).click()
  await expect(page.getByText('1 of 2 steps are done.')).toBeVisible()
  await page.getByText('Fit the dosing disc', { exact: true }).click()
  await page.getByLabel('Reading', { exact: true }).fill('0,05')
  await page.getByRole('button', { name: 'Add the reading' }).click()
  await expect(page.getByRole('cell', { name: '0.05 mm' })).toBeVisible()
  await page.getByLabel('Trials to first-off').fill('3')
  await page.getByLabel('Capsules scrapped').fill('1500')
  await page.getByRole('button', { name: 'The change is done' }).click()
  await expect(page.getByText('a second person has to check it')).toBeVisible()

  const second = await pageOf(browser, 'engineer')
  await second.goto(page.url())
  await second.getByRole('button', { name: 'Check and sign' }).click()
  await sign(second, 'engineer')
  await expect(second.getByText(/checked by Engineer 1/)).toBeVisible()
})

let sampleAddress = ''

test('the operator types a sample like a balance does; three weights outlive a closed browser', async ({ browser }) => {
  const page = await pageOf(browser, 'operator')
  const machine = page.getByRole('article').filter({ has: page.getByRole('heading', { name: MACHINE }) })
  await machine.getByRole('button', { name: 'Weigh' }).click()
  const field = page.getByLabel(/^Capsule 1 of/)
  await expect(field).toBeFocused()
  for (const [place, weight] of GROSS.slice(0, 3).entries()) {
    await page.keyboard.type(String(weight))
    await page.keyboard.press('Enter')
    await expect(page.getByText(`Capsule ${place + 2} of`, { exact: false })).toBeVisible()
  }
  sampleAddress = page.url()
  await page.context().close()

  const again = await pageOf(browser, 'operator')
  await again.goto(sampleAddress)
  await expect(again.getByText('Capsule 4 of', { exact: false })).toBeVisible()
  await again.keyboard.type('20')
  await again.keyboard.press('Enter')
  await expect(again.getByText(/no more than an empty shell/)).toBeVisible()
  await again.keyboard.press('Control+A')
  for (const weight of GROSS.slice(3)) {
    const before = await again.getByText(/^Capsule \d+ of/).textContent()
    await again.keyboard.type(String(weight))
    await again.keyboard.press('Enter')
    await expect(again.getByText(before ?? '', { exact: true })).toHaveCount(0)
  }
  for (let extra = 0; extra < 60 && (await again.getByLabel(/^Capsule \d+ of/).count()) > 0; extra++) {
    const before = await again.getByText(/^Capsule \d+ of/).textContent()
    await again.keyboard.type('98.6')
    await again.keyboard.press('Enter')
    await expect(again.getByText(before ?? '', { exact: true })).toHaveCount(0)
  }
  await expect(again.getByRole('heading', { level: 1 })).toContainText(/In control|Alert|Action/)
  await expect(again.getByRole('table')).toBeVisible()
})

test('the operator uploads a CSV with 200 weights; the second time it is refused', async ({ browser }) => {
  const page = await pageOf(browser, 'operator')
  const lines = Array.from({ length: 200 }, (_, place) => (98.5 + 1.2 * Math.sin(place)).toFixed(1))
  const file = { name: 'balance.csv', mimeType: 'text/csv', buffer: Buffer.from(`Weight mg\n${lines.join('\n')}\n`) }
  const upload = async (): Promise<void> => {
    await page.goto('/weigh/file')
    await choose(page.getByLabel('Batch', { exact: true }), new RegExp(`on ${MACHINE}$`))
    await choose(page.getByLabel('Balance', { exact: true }), /^BAL/)
    await page.getByLabel('CSV from the balance').setInputFiles(file)
    await page.getByRole('button', { name: 'Show how it reads' }).click()
  }
  await upload()
  await expect(page.getByRole('heading', { name: 'How it reads' })).toBeVisible()
  await page.getByRole('button', { name: 'It reads right: take the weights' }).click()
  await expect(page.getByText(/200 weights in 1 sample were taken/)).toBeVisible()
  await upload()
  await expect(page.getByText(/was taken already/)).toBeVisible()
})

test('the engineer sees the drift after the change and adjusts', async ({ browser }) => {
  const page = await pageOf(browser, 'engineer')
  await page.getByRole('link', { name: /F2/ }).click()
  await expect(page.getByText(/falling by/)).toBeVisible()
  await expect(page.getByRole('img', { name: /Control chart of batch/ })).toBeVisible()
  await page.getByRole('img', { name: /Control chart of batch/ }).focus()
  await page.keyboard.press('End')
  await expect(page.getByRole('button', { name: 'Every capsule' })).toBeVisible()
  await expect(page.getByText('Capability of the batch, Ppk')).toBeVisible()
  await page.getByLabel('From, mm').fill('12')
  await page.getByLabel('To, mm').fill('13')
  await page.getByLabel('Why the setting was moved').fill('Mean falling since the change')
  await page.getByRole('button', { name: 'Record the adjustment' }).click()
  await expect(page.getByLabel('From, mm')).toHaveValue('')
  await page.goto('/weigh')
  await expect(page.getByText(/a setting was moved/)).toBeVisible()
})

test('QA signs the release and opens the PDF', async ({ browser }) => {
  const page = await pageOf(browser, 'qa')
  const row = page.getByRole('row').filter({ hasText: 'Awaiting release' })
  await row.getByRole('link').click()
  const download = page.waitForEvent('download')
  await page.getByRole('button', { name: 'Batch record (PDF)' }).click()
  const pdf = await (await download).createReadStream()
  const pieces: Buffer[] = []
  for await (const piece of pdf) pieces.push(piece as Buffer)
  expect(Buffer.concat(pieces).subarray(0, 5).toString()).toBe('%PDF-')
  await page.getByRole('button', { name: 'Release', exact: true }).click()
  await sign(page, 'qa', 'All records reviewed, nothing open')
  await expect(page.getByText(/This batch was released by QA/)).toBeVisible()
  await expect(page.getByRole('button', { name: 'Reject' })).toHaveCount(0)
})

test('the viewer opens the review of the week', async ({ browser }) => {
  const page = await pageOf(browser, 'viewer')
  await expect(page.getByRole('heading', { name: /Review of week/ })).toBeVisible()
  await page.getByRole('button', { name: 'Week before' }).click()
  await expect(page.getByRole('heading', { name: 'Batches of the week' })).toBeVisible()
  await expect(page.getByRole('table').first()).toBeVisible()
})
