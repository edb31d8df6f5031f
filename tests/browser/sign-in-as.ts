import { expect, type Page } from '@playwright/test'

interface DemoSignIn {
  role: string
  email: string
  password: string
}

let known: DemoSignIn[] = []

/** The demo sign-in of a role; the demo names them itself, on this machine alone. */
export function demoSignIn(role: string): DemoSignIn {
  const found = known.find((one) => one.role === role)
  if (!found) throw new Error(`The demo has no sign-in for ${role}, or nobody has signed in yet.`)
  return found
}

/** Signs in through the page as a person does, and waits for the page of the role. */
export async function signInAs(page: Page, role: string): Promise<void> {
  const about = (await (await page.request.get('/api/about')).json()) as { demoSignIns: DemoSignIn[] }
  known = about.demoSignIns
  const { email, password } = demoSignIn(role)
  await page.goto('/sign-in')
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Pass-phrase').fill(password)
  await page.getByRole('button', { name: 'Sign in', exact: true }).click()
  await expect(page).not.toHaveURL(/sign-in/)
}
