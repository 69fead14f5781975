import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Page } from 'playwright-core'
import { startApp, type TestApp } from '../support/app'
import { findAccessibilityProblems, openBrowser, type TestBrowser } from '../support/browser'
import { createTestDatabase, type TestDatabase } from '../support/database'
import { signIn, type SignedIn } from '../support/sign-in'
import { COLORS } from '../../utils/tokens'

/** The plain pages: looked at in both widths and themes, and held to what every page must keep. */
describe('the plain pages', () => {
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

  const PAGES = [
    { path: '/', heading: 'How hot does the fluid get on the pull it is built for?' },
    { path: '/method', heading: 'How the numbers are made' },
    { path: '/sign-in', heading: 'Sign in' },
    { path: '/builds', heading: 'Builds', signedIn: true },
    { path: '/builds?search=nothing+like+it', heading: 'Builds', signedIn: true },
    { path: '/nowhere', heading: 'There is nothing here', status: 404 },
  ]
  /** Every page in both widths and both themes, in two looks instead of four; which two, alternates. */
  const LOOKS = PAGES.flatMap((page, index) =>
    (['phone', 'desk'] as const).map((size) => ({
      ...page,
      size,
      colorScheme: (index % 2 === 0) === (size === 'phone') ? ('dark' as const) : ('light' as const),
    })),
  )

  it.each(LOOKS)(
    '$path can be read and used by everyone at $size width, $colorScheme',
    async ({ path, heading, signedIn, status, size, colorScheme }) => {
      const tested = await browser.newPage({
        baseUrl: app.baseUrl,
        size,
        colorScheme,
        person: signedIn ? estimator : undefined,
        expected: status === undefined ? [] : [/status of 404/],
      })
      const { page } = tested
      await tested.open(path)
      expect(await page.getByRole('heading', { level: 1 }).textContent()).toContain(heading)
      expect(await background(page)).toBe(rgb(COLORS[colorScheme].ground))
      expect(await findAccessibilityProblems(page)).toEqual([])
      expect(await sidewaysScroll(page)).toBe(0)
      expect(await smallTargets(page, size === 'phone' ? 48 : 24)).toEqual([])
      tested.expectNoProblems()
      await tested.close()
    },
  )

  it.each(PAGES)(
    '$path has no sideways scroll at 320 px, which is 1280 px at 400 %',
    async ({ path, signedIn, status }) => {
      const tested = await browser.newPage({
        baseUrl: app.baseUrl,
        size: { width: 320, height: 640 },
        person: signedIn ? estimator : undefined,
        expected: status === undefined ? [] : [/status of 404/],
      })
      await tested.open(path)
      expect(await sidewaysScroll(tested.page)).toBe(0)
      await tested.close()
    },
  )

  it('brings at most two font files of 50 kB together, one of them announced, and nothing moves for them', async () => {
    const tested = await browser.newPage({ baseUrl: app.baseUrl, size: 'desk' })
    const { page } = tested
    await page.addInitScript(() => {
      const shifts: number[] = []
      Object.assign(window, { shifts })
      new PerformanceObserver((list) => {
        for (const entry of list.getEntries()) shifts.push((entry as unknown as { value: number }).value)
      }).observe({ type: 'layout-shift', buffered: true })
    })
    const fonts = new Map<string, number>()
    page.on('response', async (response) => {
      if (response.url().endsWith('.woff2')) fonts.set(response.url(), (await response.body()).length)
    })
    await tested.open('/method')
    await page.waitForLoadState('networkidle')
    await page.evaluate(() => document.fonts.ready)
    expect(fonts.size).toBeLessThanOrEqual(2)
    expect([...fonts.values()].reduce((sum, size) => sum + size, 0)).toBeLessThanOrEqual(50_000)
    const preloads = await page.locator('link[rel="preload"][as="font"]').evaluateAll((links) => links.length)
    expect(preloads).toBe(1)
    const shift = await page.evaluate(() =>
      (window as unknown as { shifts: number[] }).shifts.reduce((sum, value) => sum + value, 0),
    )
    expect(shift).toBeLessThanOrEqual(0.02)
    await tested.close()
  })

  it('sets figures of equal width where they stand in columns', async () => {
    const tested = await browser.newPage({ baseUrl: app.baseUrl })
    await tested.open('/method')
    const widths = await tested.page.evaluate(async () => {
      await document.fonts.ready
      return ['0', '1', '4', '8'].map((figure) => {
        const probe = document.createElement('span')
        probe.className = 'figures'
        probe.textContent = figure.repeat(20)
        document.body.append(probe)
        return Math.round(probe.getBoundingClientRect().width)
      })
    })
    expect(new Set(widths).size).toBe(1)
    await tested.close()
  })

  it('shows a ring of 2 px on every stop of the keyboard', async () => {
    const tested = await browser.newPage({ baseUrl: app.baseUrl })
    const { page } = tested
    await tested.open('/sign-in')
    const seen: string[] = []
    for (let stop = 0; stop < 12; stop += 1) {
      await page.keyboard.press('Tab')
      const ring = await page.evaluate(() => {
        const element = document.activeElement
        if (!(element instanceof HTMLElement) || element === document.body) return null
        // A radio button is drawn by its segment, which wears the ring.
        const drawn = element.matches('input[type="radio"]') ? (element.closest('label') ?? element) : element
        const style = getComputedStyle(drawn)
        return {
          name: element.getAttribute('aria-label') ?? element.textContent?.trim() ?? element.id,
          width: Number.parseFloat(style.outlineWidth),
          style: style.outlineStyle,
        }
      })
      if (ring === null) break
      seen.push(ring.name)
      expect(ring.width, ring.name).toBeGreaterThanOrEqual(2)
      expect(ring.style, ring.name).not.toBe('none')
    }
    expect(seen[0]).toBe('Skip to content')
    expect(seen.length).toBeGreaterThanOrEqual(10)
    await tested.close()
  })

  it('skips to the content', async () => {
    const tested = await browser.newPage({ baseUrl: app.baseUrl })
    await tested.open('/method')
    await tested.page.keyboard.press('Tab')
    await tested.page.keyboard.press('Enter')
    expect(await tested.page.evaluate(() => document.activeElement?.id)).toBe('content')
    await tested.close()
  })

  it('can be read without a script', async () => {
    const tested = await browser.newPage({ baseUrl: app.baseUrl, javaScript: false, colorScheme: 'dark' })
    await tested.open('/method')
    expect(await tested.page.getByRole('heading', { level: 2 }).count()).toBeGreaterThan(10)
    expect(await background(tested.page)).toBe(rgb(COLORS.dark.ground))
    await tested.close()
  })

  it('answers an address that is not there with 404, and says where to go', async () => {
    const answer = await fetch(`${app.baseUrl}/nowhere`, { headers: { accept: 'text/html' } })
    expect(answer.status).toBe(404)
    const text = await answer.text()
    expect(text).toContain('There is nothing here')
    expect(text).toContain('Go to builds')
  })
})

const background = (page: Page) => page.evaluate(() => getComputedStyle(document.body).backgroundColor)

function rgb(hex: string): string {
  const [red, green, blue] = [1, 3, 5].map((start) => Number.parseInt(hex.slice(start, start + 2), 16))
  return `rgb(${red}, ${green}, ${blue})`
}

/** How far the page can be scrolled to the side [px]. */
const sidewaysScroll = (page: Page) =>
  page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)

/**
 * What can be pressed and is smaller than it must be, but for links inside a line of text, which the rule excepts
 * (W3C, WCAG 2.2, success criterion 2.5.8, "inline").
 */
const smallTargets = (page: Page, sidePx: number) =>
  page.evaluate((side) => {
    const found: string[] = []
    for (const element of document.querySelectorAll<HTMLElement>('a, button, input, select, summary')) {
      const inLine =
        element.matches('a') && element.closest('p, li')?.textContent?.trim() !== element.textContent?.trim()
      const drawn = element.matches('input[type="radio"], input[type="checkbox"]')
        ? element.closest('label')
        : element
      const box = (drawn ?? element).getBoundingClientRect()
      const hidden = box.width === 0 || getComputedStyle(element).visibility === 'hidden' || box.bottom < 0
      if (hidden || (inLine && getComputedStyle(element).display === 'inline')) continue
      // Neighboring segments share a pixel of border.
      if (box.height < side - 1 || box.width < side - 1)
        found.push(
          `${element.tagName} “${element.textContent?.trim().slice(0, 40)}” ${box.width}×${box.height}`,
        )
    }
    return found
  }, sidePx)
