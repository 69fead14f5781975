import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startApp, type TestApp } from '../support/app'
import { findAccessibilityProblems, openBrowser, type TestBrowser } from '../support/browser'
import { createTestDatabase, type TestDatabase } from '../support/database'
import { callApi, DEMO_PASSWORD, signIn } from '../support/sign-in'
import { DEMO_SIGN_INS } from '../../utils/demo-sign-ins'

/** What people do on the plain pages, by role and visible text. */
describe('the plain pages in use', () => {
  let database: TestDatabase
  let app: TestApp
  let browser: TestBrowser

  beforeAll(async () => {
    database = await createTestDatabase()
    app = await startApp({ database })
    browser = await openBrowser()
  })

  afterAll(async () => {
    await browser.close()
    await app.stop()
    await database.drop()
  })

  describe('signing in', () => {
    it('works by keyboard alone, and goes on to the page that was asked for', async () => {
      const tested = await browser.newPage({ baseUrl: app.baseUrl })
      const { page } = tested
      await tested.open('/builds?stage=quoted')
      expect(new URL(page.url()).pathname).toBe('/sign-in')
      await page.getByLabel('E-mail').focus()
      await page.keyboard.type('estimator@longpull.test')
      await page.keyboard.press('Tab')
      await page.keyboard.type(DEMO_PASSWORD)
      await page.keyboard.press('Enter')
      await page.waitForURL('**/builds?stage=quoted')
      await page.getByRole('heading', { level: 1, name: 'Builds' }).waitFor()
      expect(await page.getByLabel('Stage').inputValue()).toBe('quoted')
      await tested.close()
    })

    it('says what is wrong, and keeps what was typed', async () => {
      const tested = await browser.newPage({
        baseUrl: app.baseUrl,
        size: 'phone',
        expected: [/status of 401/],
      })
      const { page } = tested
      await tested.open('/sign-in')
      await page.getByRole('button', { name: 'Sign in', exact: true }).click()
      await page.getByText('The e-mail address is missing.').waitFor()
      expect(await page.getByLabel('E-mail').evaluate((field) => field === document.activeElement)).toBe(true)
      expect(await findAccessibilityProblems(page)).toEqual([])

      await page.getByLabel('E-mail').fill('estimator@longpull.test')
      await page.getByLabel('Password', { exact: true }).fill('not this one')
      await page.getByRole('button', { name: 'Sign in', exact: true }).click()
      await page.getByRole('alert').waitFor()
      expect(await page.getByRole('alert').textContent()).toContain('E-mail or password is not right')
      expect(await page.getByLabel('E-mail').inputValue()).toBe('estimator@longpull.test')
      expect(await page.getByLabel('Password', { exact: true }).inputValue()).toBe('not this one')
      expect(await findAccessibilityProblems(page)).toEqual([])
      await tested.close()
    })

    it('never goes to another site', async () => {
      const tested = await browser.newPage({ baseUrl: app.baseUrl })
      const { page } = tested
      await tested.open('/sign-in?returnTo=//elsewhere.test/builds')
      await page.getByRole('button', { name: /estimator@longpull\.test/ }).click()
      await page.getByRole('button', { name: 'Sign in', exact: true }).click()
      await page.waitForURL(`${app.baseUrl}/builds`)
      await tested.close()
    })

    it.each(DEMO_SIGN_INS)('is open to $email of the demonstration', async ({ email }) => {
      const answer = await callApi(app, 'POST', '/api/auth/sign-in', {
        body: { email, password: DEMO_PASSWORD },
      })
      expect(answer.status).toBe(200)
    })

    it('tells a customer, whose role has no builds, what to do instead of a list', async () => {
      const tested = await browser.newPage({
        baseUrl: app.baseUrl,
        person: await signIn(app, 'customer'),
        expected: [/status of 403/],
      })
      await tested.open('/builds')
      await tested.page.getByRole('heading', { name: 'Your role does not include this' }).waitFor()
      expect(await tested.page.getByRole('link', { name: 'Builds', exact: true }).count()).toBe(0)
      expect(await findAccessibilityProblems(tested.page)).toEqual([])
      await tested.close()
    })

    it('lists the demo sign-ins only in a demonstration', async () => {
      const page = async (served: TestApp) => (await fetch(`${served.baseUrl}/sign-in`)).text()
      expect(await page(app)).toContain('Demo sign-ins')
      const real = await startApp({ database, env: { LONGPULL_DEMO: undefined } })
      try {
        const text = await page(real)
        expect(text).not.toContain('Demo sign-ins')
        expect(text).not.toContain(DEMO_PASSWORD)
      } finally {
        await real.stop()
      }
    })
  })

  it('opens and closes the menu by keys, and signs out from it', async () => {
    const person = await signIn(app, 'technician')
    const tested = await browser.newPage({ baseUrl: app.baseUrl, size: 'phone', person })
    const { page } = tested
    await tested.open('/builds')
    const menu = page.getByRole('button', { name: 'Menu' })
    await menu.press('Enter')
    expect(await menu.getAttribute('aria-expanded')).toBe('true')
    expect(await findAccessibilityProblems(page)).toEqual([])
    await page.keyboard.press('Tab')
    await page.keyboard.press('Escape')
    expect(await menu.getAttribute('aria-expanded')).toBe('false')
    expect(await menu.evaluate((button) => button === document.activeElement)).toBe(true)

    await menu.click()
    await page.getByRole('button', { name: 'Sign out' }).click()
    await page.waitForURL('**/sign-in')
    expect((await person.call('GET', '/api/auth/me')).status).toBe(401)
    await tested.close()
  })

  it('says that the database does not answer, on a page and where one signs in', async () => {
    const lost = await createTestDatabase()
    const cut = await startApp({ database: lost })
    try {
      const person = await signIn(cut, 'estimator')
      await lost.drop()
      const tested = await browser.newPage({ baseUrl: cut.baseUrl, person, expected: [/status of 503/] })
      const { page } = tested
      await tested.open('/builds')
      await page.getByRole('heading', { name: 'The database does not answer right now' }).waitFor()
      await page.getByRole('button', { name: 'Try again' }).waitFor()
      expect(await findAccessibilityProblems(page)).toEqual([])
      await tested.open('/sign-in')
      await page.getByText('Signing in may fail for a moment.').waitFor()
      await tested.close()
    } finally {
      await cut.stop()
    }
  })

  describe('units and theme', () => {
    it('are in the first paint, from what this device chose', async () => {
      const text = await (
        await fetch(`${app.baseUrl}/`, { headers: { cookie: 'longpull-units=metric' } })
      ).text()
      expect(text).toContain('93\u00a0°C')
      expect(text).not.toContain('200\u00a0°F')
    })

    it('stay with a visitor over a reload', async () => {
      const tested = await browser.newPage({ baseUrl: app.baseUrl })
      const { page } = tested
      await tested.open('/')
      await page.getByText(/^watch 200/).waitFor()
      await page
        .getByRole('banner')
        .getByRole('radio', { name: /Celsius/ })
        .check()
      await page.getByText(/^watch 93/).waitFor()
      await page.getByRole('button', { name: 'Menu' }).click()
      await page.getByRole('radio', { name: 'Dark' }).check()
      expect(await page.locator('html').getAttribute('class')).toContain('dark')
      await tested.open('/')
      await page.getByText(/^watch 93/).waitFor()
      expect(await page.locator('html').getAttribute('class')).toContain('dark')
      await tested.close()
    })

    it('go with a signed-in person to another device', async () => {
      const first = await browser.newPage({ baseUrl: app.baseUrl, person: await signIn(app, 'owner') })
      await first.open('/builds')
      const saved = first.page.waitForResponse('**/api/auth/me')
      await first.page
        .getByRole('banner')
        .getByRole('radio', { name: /Celsius/ })
        .check()
      expect((await saved).status()).toBe(200)
      await first.close()

      const second = await browser.newPage({ baseUrl: app.baseUrl, person: await signIn(app, 'owner') })
      await second.open('/builds')
      const cells = await second.page.getByRole('table').textContent()
      expect(cells).toContain('°C')
      expect(cells).not.toContain('°F')
      await second.close()
    })
  })

  describe('the list of builds', () => {
    it('searches, filters and sorts in its address, and back takes a step back', async () => {
      const tested = await browser.newPage({ baseUrl: app.baseUrl, person: await signIn(app, 'estimator') })
      const { page } = tested
      await tested.open('/method')
      await page.keyboard.press('/')
      await page.waitForURL('**/builds')
      const search = page.getByRole('searchbox', { name: 'Search builds' })
      await search.and(page.locator(':focus')).waitFor()

      const names = async () =>
        (await page.locator('tbody tr td:first-child').allTextContents()).map((name) => name.trim())
      const all = await names()
      expect(all.length).toBeGreaterThanOrEqual(6)
      await page.keyboard.type('diesel')
      await page.waitForURL('**/builds?search=diesel')
      await page.getByText(/^2 builds$/).waitFor()
      for (const name of await names()) expect(name.toLowerCase()).toContain('diesel')

      await search.fill('')
      await page.waitForURL('**/builds')
      await page.getByRole('button', { name: 'Build', exact: true }).click()
      await page.waitForURL('**/builds?sort=name')
      await expect.poll(names).toEqual([...all].sort((a, b) => a.localeCompare(b, 'en')))
      await page.getByRole('button', { name: 'Build', exact: true }).click()
      await page.waitForURL('**/builds?sort=name&direction=desc')
      await expect.poll(names).toEqual([...all].sort((a, b) => b.localeCompare(a, 'en')))
      expect(
        await page.getByRole('columnheader', { name: 'Build', exact: true }).getAttribute('aria-sort'),
      ).toBe('descending')
      await page.goBack()
      await expect.poll(names).toEqual([...all].sort((a, b) => a.localeCompare(b, 'en')))

      await page.getByLabel('Stage').selectOption('quoted')
      await page.waitForURL('**/builds?stage=quoted&sort=name')
      await expect.poll(async () => (await names()).length).toBe(1)
      await tested.close()
    })

    it('types a slash where somebody types', async () => {
      const tested = await browser.newPage({ baseUrl: app.baseUrl, person: await signIn(app, 'estimator') })
      await tested.open('/builds')
      const search = tested.page.getByRole('searchbox', { name: 'Search builds' })
      await search.focus()
      await tested.page.keyboard.type('3/4')
      expect(await search.inputValue()).toBe('3/4')
      await tested.close()
    })

    it('is cards on a phone, told apart by word and by the weight of their rule', async () => {
      const tested = await browser.newPage({
        baseUrl: app.baseUrl,
        size: 'phone',
        person: await signIn(app, 'technician'),
      })
      const { page } = tested
      await tested.open('/builds')
      expect(await page.getByRole('table').count()).toBe(0)
      const cards = page.getByRole('main').getByRole('listitem')
      expect(await cards.count()).toBeGreaterThanOrEqual(6)
      const weights = await cards.evaluateAll((items) =>
        items.map((item) => ({
          words: item.textContent ?? '',
          weight: Number.parseFloat(getComputedStyle(item).borderLeftWidth),
        })),
      )
      for (const { words, weight } of weights) {
        const expected = words.includes('ease off')
          ? 3
          : words.includes('watch')
            ? 2
            : words.includes('stop')
              ? 4
              : 1
        expect(weight, words).toBe(expected)
      }
      // A technician reads; only a desk begins a build.
      expect(await page.getByRole('link', { name: 'New build' }).count()).toBe(0)
      await tested.close()
    })

    it('asks for a sign-in over the page when the session ends, and then goes on', async () => {
      const person = await signIn(app, 'estimator')
      const tested = await browser.newPage({ baseUrl: app.baseUrl, person, expected: [/status of 401/] })
      const { page } = tested
      await tested.open('/builds')
      await person.call('POST', '/api/auth/sign-out')

      await page.getByRole('searchbox', { name: 'Search builds' }).fill('dunes')
      const dialog = page.getByRole('dialog', { name: 'Sign in to go on' })
      await dialog.waitFor()
      expect(await findAccessibilityProblems(page)).toEqual([])
      expect(await dialog.getByLabel('E-mail').inputValue()).toBe('estimator@longpull.test')
      await dialog.getByLabel('Password', { exact: true }).fill(DEMO_PASSWORD)
      await dialog.getByRole('button', { name: 'Sign in', exact: true }).click()
      await page.getByText(/^1 build$/).waitFor()
      expect(await page.getByRole('searchbox', { name: 'Search builds' }).inputValue()).toBe('dunes')
      expect(await dialog.count()).toBe(0)
      await tested.close()
    })

    it('keeps the list and says so when the server cannot be reached', async () => {
      const tested = await browser.newPage({
        baseUrl: app.baseUrl,
        person: await signIn(app, 'estimator'),
        expected: [/ERR_FAILED|ERR_INTERNET_DISCONNECTED/],
      })
      const { page } = tested
      await tested.open('/builds')
      await page.route('**/api/builds*', (route) => route.abort())
      await page.getByRole('button', { name: 'Customer' }).click()
      await page.getByRole('alert').getByText('The server cannot be reached.').waitFor()
      expect(await page.locator('tbody tr').count()).toBeGreaterThanOrEqual(6)
      await page.unroute('**/api/builds*')
      await page.getByRole('button', { name: 'Load it again' }).click()
      await expect.poll(() => page.getByRole('alert').count()).toBe(0)
      await tested.close()
    })
  })
})
