import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Page } from 'playwright-core'
import { startApp, type TestApp } from '../support/app'
import { openBrowser, type TestBrowser, type TestPage } from '../support/browser'
import { createTestDatabase, type TestDatabase } from '../support/database'
import { DEMO_PASSWORD, signIn, type SignedIn } from '../support/sign-in'
import type { BuildAnswer, BuildList } from '../../shared/schemas/build'
import type { ResultList } from '../../shared/schemas/result'

/** The main job as an estimator does it: eight facts in, an answer, saved, there tomorrow. */
describe('the workbench in use', () => {
  let database: TestDatabase
  let app: TestApp
  let browser: TestBrowser
  let estimator: SignedIn

  beforeAll(async () => {
    database = await createTestDatabase()
    app = await startApp({ database })
    browser = await openBrowser()
    estimator = await signIn(app, 'estimator')
  })

  afterAll(async () => {
    await browser.close()
    await app.stop()
    await database.drop()
  })

  const answerOf = (page: Page) => page.getByRole('region', { name: 'Answer' })
  /** What stands at one place of the answer, in one line. */
  const reading = async (page: Page, name: string) =>
    (
      await answerOf(page)
        .locator('div', { has: page.getByRole('heading', { name }) })
        .last()
        .innerText()
    ).replace(/\s+/g, ' ')
  /** Its figure, such as "231 °F". */
  const panFigure = async (page: Page) => /\d+ °[FC]/.exec(await reading(page, 'Pan, peak'))?.[0] ?? ''
  const saved = (page: Page) =>
    page
      .getByRole('status')
      .filter({ hasText: /^Saved$/ })
      .waitFor()

  /** The card and the workbench have fields of the same name: only the workbench says this. */
  async function onBench(page: Page) {
    await page.waitForURL('**/scenarios/*')
    await page.getByRole('heading', { name: 'Change anything' }).waitFor()
  }

  /** A build of its own for a test that changes one. */
  async function openNewBuild(
    options: { person?: SignedIn; expected?: RegExp[] } = {},
  ): Promise<TestPage & { address: string }> {
    const tested = await browser.newPage({ baseUrl: app.baseUrl, person: estimator, ...options })
    await tested.open('/builds/new')
    await tested.page.getByRole('button', { name: 'Save this build' }).click()
    await onBench(tested.page)
    return { ...tested, address: new URL(tested.page.url()).pathname }
  }

  it('goes from sign-in through eight facts to a saved build that is there tomorrow', async () => {
    const tested = await browser.newPage({ baseUrl: app.baseUrl })
    const { page } = tested
    await tested.open('/sign-in?returnTo=/builds')
    await page.getByLabel('E-mail').fill('estimator@longpull.test')
    await page.getByLabel('Password', { exact: true }).fill(DEMO_PASSWORD)
    await page.getByRole('button', { name: 'Sign in', exact: true }).click()
    await page.getByRole('link', { name: 'New build' }).click()
    await page.waitForURL('**/builds/new')

    // An answer stands there before anything is typed.
    expect(await panFigure(page)).toMatch(/^\d{2,3} °F$/)
    const first = await panFigure(page)

    await page.getByRole('radio', { name: /Heavy diesel pickup/ }).check()
    await page.getByLabel('Truck with people and gear').fill('9,400 lb')
    await page.getByLabel('Trailer, loaded').fill('12000')
    await page.getByLabel('Tire size').fill('33 in')
    await page.getByText(/33\.0.in tall, rolls at/).waitFor()
    await page.getByLabel('Axle ratio').fill('4.1')
    await page.getByRole('group', { name: 'Seen to lock on the road' }).getByLabel('Yes').check()
    await page.getByLabel('Grade').first().fill('7')
    await page.getByLabel('Outside air').fill('104')
    expect(await panFigure(page)).not.toBe(first)
    await page.getByText('Lock-up is proven: judged locked.').waitFor()
    await page.getByRole('heading', { name: 'The cooler it needs' }).waitFor()
    await page
      .getByText(/at the reference point would hold it|No cooler needed|No cooler fixes this/)
      .waitFor()

    await page.getByLabel('Name of the build').fill('Hay hauler')
    await page.getByLabel('Customer').fill('Odalys Fenwright')
    const before = await panFigure(page)
    await page.getByRole('button', { name: 'Save this build' }).click()
    await onBench(page)
    expect(await panFigure(page)).toBe(before)
    const address = new URL(page.url()).pathname
    await tested.close()

    // Tomorrow: another browser, another sign-in, the same numbers.
    const tomorrow = await browser.newPage({ baseUrl: app.baseUrl, person: await signIn(app, 'estimator') })
    await tomorrow.open(address)
    expect(await panFigure(tomorrow.page)).toBe(before)
    expect(await tomorrow.page.getByRole('link', { name: 'Hay hauler' }).count()).toBe(1)
    expect(await tomorrow.page.getByRole('textbox', { name: /Grade of the hill/ }).inputValue()).toBe('7')
    expect(await tomorrow.page.getByRole('textbox', { name: /Trailer, loaded/ }).inputValue()).toBe('12,000')
    await tomorrow.page.locator('summary', { hasText: 'Vehicle' }).first().click()
    expect(await tomorrow.page.getByLabel('Tire size').inputValue()).toBe('33 in')
    expect(
      await tomorrow.page.getByRole('textbox', { name: /Weight with people and gear/ }).inputValue(),
    ).toBe('9,400')
    await tomorrow.close()

    // The list knows the answer the server itself computed and stored.
    const list = (await estimator.call('GET', '/api/builds?search=Hay%20hauler')).body as BuildList
    expect(list.builds[0]?.peakSumpC).toBeGreaterThan(60)
  })

  it('moves the answer with every change, leaves the former value as a ghost, saves, and stores the result', async () => {
    const tested = await openNewBuild()
    const { page, address } = tested
    const before = await panFigure(page)
    await page.getByRole('textbox', { name: /Grade of the hill/ }).fill('3')
    expect(await panFigure(page)).not.toBe(before)
    expect(await reading(page, 'Pan, peak')).toContain(`was ${before}`)
    await saved(page)
    const after = await panFigure(page)
    const [, buildId, scenarioId] = /builds\/(.+)\/scenarios\/(.+)$/.exec(address) ?? []
    await expect
      .poll(
        async () => {
          const { body } = await estimator.call(
            'GET',
            `/api/builds/${buildId}/scenarios/${scenarioId}/results`,
          )
          return (body as ResultList).results[0]?.input.duty.segments[1]
        },
        { timeout: 15_000 },
      )
      .toMatchObject({ grade: 0.03 })
    await tested.open(address)
    expect(await panFigure(page)).toBe(after)
    expect(await page.getByRole('textbox', { name: /Grade of the hill/ }).inputValue()).toBe('3')
    await tested.close()
  })

  it('takes a value by field, by step and by slider keys alike (A4)', async () => {
    const tested = await openNewBuild()
    const { page } = tested
    const field = page.getByRole('textbox', { name: /Speed up the hill/ })
    const slider = page.getByRole('slider', { name: 'Speed up the hill' })
    await field.fill('40')
    expect(await slider.inputValue()).toBe('40')
    expect((await slider.getAttribute('aria-valuetext'))?.replaceAll('\u00a0', ' ')).toBe('40 mph')
    await page.getByRole('button', { name: 'Speed up the hill: more' }).click()
    expect(await field.inputValue()).toBe('41')
    await slider.focus()
    await page.keyboard.press('ArrowLeft')
    expect(await field.inputValue()).toBe('40')
    await page.keyboard.press('End')
    expect(await field.inputValue()).toBe('75')
    await page.keyboard.press('Home')
    expect(await field.inputValue()).toBe('5')
    await page.keyboard.press('PageUp')
    expect(Number(await field.inputValue())).toBeGreaterThan(6)

    // A hill that is moved down to flat is still the one that is moved.
    const grade = page.getByRole('textbox', { name: /Grade of the hill/ })
    await grade.fill('0')
    await grade.fill('7')
    await saved(page)
    await page.locator('summary', { hasText: 'Drive cycle' }).first().click()
    await page.locator('summary', { hasText: '2. Climb 7 %' }).waitFor()
    await tested.close()
  })

  it('reads the chart by keys, and has its data as a table', async () => {
    const tested = await openNewBuild()
    const { page } = tested
    const chart = page.getByRole('region', { name: 'Temperature versus grade' })
    const cursor = chart.getByRole('slider', { name: 'Read at' })
    await cursor.focus()
    await page.keyboard.press('Home')
    expect(await cursor.getAttribute('aria-valuetext')).toMatch(
      /^0 %: Unlocked: pan .*, to-cooler line .*, gear \d/,
    )
    await page.keyboard.press('ArrowRight')
    expect(await cursor.getAttribute('aria-valuetext')).toMatch(/^0\.5 %: /)
    await chart.locator('summary').focus()
    await page.keyboard.press('Enter')
    const table = chart.getByRole('table', { name: 'Temperature by grade' })
    await table.waitFor()
    expect(await table.innerText()).toContain('If it locks')
    expect(await table.getByRole('row').count()).toBeGreaterThan(50)
    await tested.close()
  })

  it('shows everything in the other units at once, and comes back to what was typed', async () => {
    const tested = await openNewBuild()
    const { page, address } = tested
    const trailer = page.getByRole('textbox', { name: /Trailer, loaded/ })
    await trailer.fill('5,432')
    await saved(page)
    await page.getByRole('radio', { name: /Celsius|°C/ }).check()
    expect(await trailer.inputValue()).toBe('2,460')
    expect(await panFigure(page)).toMatch(/°C$/)
    await tested.open(address)
    expect(await panFigure(page)).toMatch(/°C$/)
    await page.getByRole('radio', { name: /Fahrenheit|°F/ }).check()
    expect(await trailer.inputValue()).toBe('5,432')
    await tested.close()
  })

  it('lets a technician look and not change', async () => {
    const list = (await estimator.call('GET', '/api/builds?sort=name')).body as BuildList
    const build = list.builds.find(({ scenarioId }) => scenarioId !== null)
    const technician = await signIn(app, 'technician')
    const tested = await browser.newPage({ baseUrl: app.baseUrl, person: technician, size: 'phone' })
    const { page } = tested
    await tested.open(`/builds/${build?.id}/scenarios/${build?.scenarioId}`)
    await page.getByText('You may look at this build.').waitFor()
    expect(await panFigure(page)).toMatch(/°F$/)
    expect(await page.getByRole('textbox', { name: /Grade of the hill/ }).count()).toBe(0)
    expect(await page.getByRole('status').filter({ hasText: 'Saved' }).count()).toBe(0)
    await tested.close()
  })

  it('tells a second tab that it is behind, overwrites nothing unasked, and loses nothing (R5)', async () => {
    const first = await openNewBuild({ expected: [/status of 412/] })
    const second = await browser.newPage({
      baseUrl: app.baseUrl,
      person: estimator,
      expected: [/status of 412/],
    })
    await second.open(first.address)
    await first.page.getByRole('textbox', { name: /Outside air/ }).fill('70')
    await saved(first.page)

    await second.page.getByRole('textbox', { name: /Grade of the hill/ }).fill('4.5')
    await second.page.getByText('Somebody saved this after you opened it.').waitFor()
    expect(await second.page.getByRole('textbox', { name: /Grade of the hill/ }).inputValue()).toBe('4.5')
    await second.page.getByRole('button', { name: 'Take theirs, drop mine' }).click()
    await saved(second.page)
    expect(await second.page.getByRole('textbox', { name: /Outside air/ }).inputValue()).toBe('70')
    expect(await second.page.getByRole('textbox', { name: /Grade of the hill/ }).inputValue()).toBe('6')

    await first.page.getByRole('textbox', { name: /Outside air/ }).fill('80')
    await saved(first.page)
    await second.page.getByRole('textbox', { name: /Grade of the hill/ }).fill('5')
    await second.page.getByRole('button', { name: 'Save mine over it' }).click()
    await saved(second.page)
    await first.open(first.address)
    expect(await first.page.getByRole('textbox', { name: /Grade of the hill/ }).inputValue()).toBe('5')
    await first.close()
    await second.close()
  })

  it('keeps typing through a dead server and a closed page, and saves it when the server is back', async () => {
    const tested = await openNewBuild({ expected: [/ERR_FAILED|Failed to load resource/] })
    const { page, address } = tested
    const save = (url: URL) => url.pathname.startsWith('/api/builds/')
    await page.route(save, (route) =>
      route.request().method() === 'PATCH' ? route.abort() : route.continue(),
    )
    await page.getByRole('textbox', { name: /Outside air/ }).fill('91')
    await page.getByText('Not saved: the server cannot be reached.').waitFor()
    expect(await page.getByRole('textbox', { name: /Outside air/ }).inputValue()).toBe('91')

    // The page goes away before it was saved, against the browser's own warning.
    page.on('dialog', (dialog) => void dialog.accept())
    await page.reload({ waitUntil: 'load' })
    await expect.poll(() => page.getByRole('textbox', { name: /Outside air/ }).inputValue()).toBe('91')
    await page.unroute(save)
    await page
      .getByRole('button', { name: 'Try now' })
      .or(page.getByText('Saved', { exact: true }))
      .first()
      .click()
    await saved(page)
    const tomorrow = await browser.newPage({ baseUrl: app.baseUrl, person: estimator })
    await tomorrow.open(address)
    expect(await tomorrow.page.getByRole('textbox', { name: /Outside air/ }).inputValue()).toBe('91')
    await tomorrow.close()
    await tested.close()
  })

  it('keeps the card of a call that was not saved, and a save that failed keeps the form', async () => {
    const tested = await browser.newPage({
      baseUrl: app.baseUrl,
      person: estimator,
      expected: [/status of 503|Failed to load resource/],
    })
    const { page } = tested
    await tested.open('/builds/new')
    await page.getByLabel('Truck with people and gear').fill('6,200')
    await page.getByLabel('Name of the build').fill('Somebody on the phone')
    await tested.open('/builds/new')
    await expect.poll(() => page.getByLabel('Truck with people and gear').inputValue()).toBe('6,200')
    expect(await page.getByLabel('Name of the build').inputValue()).toBe('Somebody on the phone')

    const create = (url: URL) => url.pathname === '/api/builds'
    await page.route(create, (route) => route.abort())
    await page.getByRole('button', { name: 'Save this build' }).click()
    await page.getByText('The build is not saved').waitFor()
    expect(await page.getByLabel('Truck with people and gear').inputValue()).toBe('6,200')
    await page.unroute(create)

    // A fact that cannot be read is mended first, and the cursor stands in it.
    await page.getByLabel('Axle ratio').fill('forty')
    await page.getByRole('button', { name: 'Save this build' }).click()
    await page.getByText('One of the facts needs another value').waitFor()
    expect(await page.getByLabel('Axle ratio').evaluate((field) => field === document.activeElement)).toBe(
      true,
    )
    await page.getByLabel('Axle ratio').fill('4.1')
    await page.getByRole('button', { name: 'Save this build' }).click()
    await page.waitForURL('**/scenarios/*')
    await tested.open('/builds/new')
    expect(await page.getByLabel('Name of the build').inputValue()).toBe('')
    await tested.close()
  })

  it('says why where the model has no answer, and keeps the last one standing', async () => {
    const tested = await openNewBuild()
    const { page } = tested
    const before = await panFigure(page)
    await page.getByRole('textbox', { name: /Trailer, loaded/ }).fill('600,000')
    await answerOf(page)
      .getByText(/cannot climb this grade/i)
      .waitFor()
    expect(await panFigure(page)).toBe(before)
    await page.getByRole('textbox', { name: /Trailer, loaded/ }).fill('4,000')
    await expect.poll(() => panFigure(page)).toBe(before)
    await tested.close()
  })

  it('edits the drive cycle, the loop and the proof of lock-up, and every change moves the answer', async () => {
    const tested = await openNewBuild()
    const { page } = tested
    const moved = async (act: () => Promise<void>) => {
      const before = (await answerOf(page).innerText()).split('was ')[0]
      await act()
      await expect.poll(async () => (await answerOf(page).innerText()).split('was ')[0]).not.toBe(before)
    }
    await moved(async () => {
      await page.locator('summary', { hasText: 'Lock-up proof' }).click()
      await page.getByRole('group', { name: 'Lock-up seen on the road' }).getByLabel('Yes').check()
    })
    await moved(async () => {
      await page.locator('summary', { hasText: 'Cooling pack' }).click()
      await page.getByLabel('Add a cooler as the last').selectOption({ label: 'Some stacked plate cooler' })
      await page.getByRole('button', { name: 'Add cooler' }).click()
    })
    await page.locator('summary', { hasText: '2. Medium stacked plate cooler' }).waitFor()
    await moved(async () => {
      await page.locator('summary', { hasText: 'Drive cycle' }).first().click()
      await page.locator('summary', { hasText: '2. Climb 6 %' }).click()
      await page.getByRole('button', { name: 'Take out' }).last().scrollIntoViewIfNeeded()
      await page
        .locator('details', { hasText: '2. Climb 6 %' })
        .last()
        .getByRole('button', { name: 'Take out' })
        .click()
    })
    await saved(page)
    await tested.close()
  })

  it('is read without a script: the answer and the charts come with the page', async () => {
    const list = (await estimator.call('GET', '/api/builds?sort=name')).body as BuildList
    const build = list.builds.find(({ scenarioId }) => scenarioId !== null)
    const tested = await browser.newPage({ baseUrl: app.baseUrl, person: estimator, javaScript: false })
    const { page } = tested
    await tested.open(`/builds/${build?.id}/scenarios/${build?.scenarioId}`)
    expect(await panFigure(page)).toMatch(/°F$/)
    expect(await page.getByRole('img', { name: /^Holds|^Too hot|^Does not hold/ }).count()).toBe(1)
    await page.getByText('The same as a table').first().click()
    expect(await page.getByRole('table', { name: 'Temperature by grade' }).count()).toBe(1)
    await tested.close()
  })

  it('carries no more with the page than the page shows (W6)', async () => {
    const list = (await estimator.call('GET', '/api/builds?sort=name')).body as BuildList
    const build = list.builds.find(({ scenarioId }) => scenarioId !== null)
    const answer = await fetch(`${app.baseUrl}/builds/${build?.id}/scenarios/${build?.scenarioId}`, {
      headers: { cookie: estimator.cookie },
    })
    const html = await answer.text()
    const payload = /<script[^>]*id="__NUXT_DATA__"[^>]*>([\s\S]*?)<\/script>/.exec(html)?.[1] ?? ''
    expect(payload.length).toBeGreaterThan(100)
    const { gzipSync } = await import('node:zlib')
    expect(gzipSync(payload).length).toBeLessThan(15_000)
    expect(payload).not.toContain('priceCents')
    const { body } = await estimator.call('GET', `/api/builds/${build?.id}`)
    expect((body as BuildAnswer).build.name.length).toBeGreaterThan(0)
  })
})
