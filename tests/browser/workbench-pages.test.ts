import { v7 as uuidv7 } from 'uuid'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { startApp, type TestApp } from '../support/app'
import { findAccessibilityProblems, openBrowser, WIDTHS, type TestBrowser } from '../support/browser'
import { createTestDatabase, type TestDatabase } from '../support/database'
import { signIn, type SignedIn } from '../support/sign-in'
import { createDefaultFacts, createSheetFromFacts } from '../../shared/build-sheet/facts'
import type { BuildList } from '../../shared/schemas/build'

/** How the workbench pages stand: every width and theme, with what is awkward in them. */
describe('the workbench pages', () => {
  let database: TestDatabase
  let app: TestApp
  let browser: TestBrowser
  let estimator: SignedIn
  let bench: string
  let overview: string

  beforeAll(async () => {
    database = await createTestDatabase()
    app = await startApp({ database })
    browser = await openBrowser()
    estimator = await signIn(app, 'estimator')
    const list = (await estimator.call('GET', '/api/builds?sort=name')).body as BuildList
    const build = list.builds.find(({ scenarioId }) => scenarioId !== null)
    overview = `/builds/${build?.id}`
    bench = `${overview}/scenarios/${build?.scenarioId}`
  })

  afterAll(async () => {
    await browser.close()
    await app.stop()
    await database.drop()
  })

  const sizes = [...(Object.keys(WIDTHS) as (keyof typeof WIDTHS)[]), { width: 320, height: 640 }]
  const states = [
    ...sizes.map((size) => ({ size, colorScheme: 'light' as const })),
    ...(Object.keys(WIDTHS) as (keyof typeof WIDTHS)[]).map((size) => ({
      size,
      colorScheme: 'dark' as const,
    })),
  ]
  const named = (size: (typeof sizes)[number]) => (typeof size === 'string' ? size : `${size.width} px`)

  for (const { size, colorScheme } of states) {
    it(`stand at ${named(size)} in ${colorScheme}: nothing for axe, nothing sideways, no error`, async () => {
      const tested = await browser.newPage({ baseUrl: app.baseUrl, person: estimator, size, colorScheme })
      const { page } = tested
      for (const path of ['/builds/new', bench, overview]) {
        await tested.open(path)
        await page.getByRole('heading', { level: 1 }).waitFor()
        expect(await findAccessibilityProblems(page), path).toEqual([])
        expect(
          await page.evaluate(
            () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
          ),
          path,
        ).toBeLessThanOrEqual(0)
      }
      tested.expectNoProblems()
      await tested.close()
    })
  }

  it('stand with every section open, every table shown, and wrong values in the fields', async () => {
    const tested = await browser.newPage({ baseUrl: app.baseUrl, person: estimator, size: 'phone' })
    const { page } = tested
    await tested.open(bench)
    await page.getByRole('table', { name: 'Catalogue parts in this truck' }).waitFor()
    await page.evaluate(() => document.querySelectorAll('details').forEach((one) => (one.open = true)))
    await page.getByRole('textbox', { name: /Grade of the hill/ }).fill('steep')
    await page.getByRole('textbox', { name: /Outside air/ }).fill('9000')
    await page.getByText('“steep” is not a number').waitFor()
    expect(await findAccessibilityProblems(page)).toEqual([])
    expect(
      await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth),
    ).toBeLessThanOrEqual(0)
    await tested.close()
  })

  it('stand with the longest names, a dozen stretches, a second and a week of driving, and no cooler at all', async () => {
    const longest = 'Donaudampfschifffahrtsgesellschaftskapitän'.repeat(3).slice(0, 120)
    const draft = createSheetFromFacts({
      ...createDefaultFacts('diesel-pickup'),
      coolers: { inTank: false, extras: [] },
    })
    const climb = { kind: 'steady' as const, speedMps: 15, grade: 0.04, durationS: 1 }
    const segments = [
      ...Array.from({ length: 10 }, () => climb),
      { kind: 'steady' as const, speedMps: 25, grade: 0, durationS: 600_000 },
      { kind: 'idle' as const, durationS: 60 },
    ]
    const ids = { build: uuidv7(), scenario: uuidv7() }
    const created = await estimator.call('POST', '/api/builds', {
      body: {
        id: ids.build,
        name: longest,
        customer: { id: uuidv7(), name: longest },
        sheet: draft.sheet,
        control: draft.control,
        limits: draft.limits,
        scenario: {
          id: ids.scenario,
          ...draft.scenario,
          name: longest,
          duty: { ...draft.scenario.duty, segments },
        },
      },
    })
    expect(created.status).toBe(201)
    for (const topGear of [2, 3])
      expect(
        (
          await estimator.call('POST', `/api/builds/${ids.build}/setups`, {
            body: { id: uuidv7(), name: `${topGear}${longest}`.slice(0, 120), change: { topGear } },
          })
        ).status,
      ).toBe(201)
    for (const size of ['phone', 'desk'] as const) {
      const tested = await browser.newPage({ baseUrl: app.baseUrl, person: estimator, size })
      const { page } = tested
      for (const path of [`/builds/${ids.build}`, `/builds/${ids.build}/scenarios/${ids.scenario}`]) {
        await tested.open(path)
        await page.getByRole('heading', { level: 1 }).waitFor()
        expect(
          await page.evaluate(
            () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
          ),
          path,
        ).toBeLessThanOrEqual(0)
      }
      await page.getByRole('table', { name: 'Catalogue parts in this truck' }).waitFor()
      expect(await findAccessibilityProblems(page)).toEqual([])
      tested.expectNoProblems()
      await tested.close()
    }
  })

  it('have targets of 48 px on the phone, and 24 px everywhere (A3)', async () => {
    for (const [size, least] of [
      ['phone', 47.5],
      ['desk', 23.5],
    ] as const) {
      const tested = await browser.newPage({ baseUrl: app.baseUrl, person: estimator, size })
      const { page } = tested
      await tested.open(bench)
      const small = await page
        .getByRole('main')
        .evaluate(
          (main, limit) =>
            [
              ...main.querySelectorAll<HTMLElement>(
                'button, select, input:not([type=radio]):not([type=checkbox]), summary',
              ),
            ]
              .filter((one) => one.offsetParent !== null && one.getBoundingClientRect().height < limit)
              .map(
                (one) =>
                  `${one.tagName} ${one.textContent?.trim().slice(0, 30) ?? ''} ${one.getBoundingClientRect().height}`,
              ),
          least,
        )
      expect(small, size).toEqual([])
      await tested.close()
    }
  })

  it('keep the answer in view while the page scrolls', async () => {
    for (const size of ['phone', 'desk'] as const) {
      const tested = await browser.newPage({ baseUrl: app.baseUrl, person: estimator, size })
      await tested.open(bench)
      await tested.page.mouse.wheel(0, 1800)
      await expect
        .poll(async () => (await tested.page.getByRole('region', { name: 'Answer' }).boundingBox())?.y ?? -1)
        .toBeGreaterThanOrEqual(0)
      await tested.close()
    }
  })

  it('let the front page be played with, without an account', async () => {
    const tested = await browser.newPage({ baseUrl: app.baseUrl, size: 'phone' })
    const { page } = tested
    await tested.open('/')
    const answer = page.getByRole('region', { name: 'Answer' })
    await answer.scrollIntoViewIfNeeded()
    const slider = page.getByRole('slider', { name: 'Trailer, loaded' })
    await slider.scrollIntoViewIfNeeded()
    const before = (await answer.innerText()).split('was ')[0]
    await expect
      .poll(async () => {
        await slider.focus()
        await page.keyboard.press('End')
        return (await answer.innerText()).split('was ')[0]
      })
      .not.toBe(before)
    expect(await findAccessibilityProblems(page)).toEqual([])
    tested.expectNoProblems()
    await tested.close()
  })
})
