import AxeBuilder from '@axe-core/playwright'
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core'
import type { SignedIn } from './sign-in'

/** Debian's; `npm test` installs it where it is missing. */
const CHROMIUM = process.env.LONGPULL_CHROMIUM ?? '/usr/bin/chromium'

/** No request of the browser's own, and no name resolved but this machine's. */
const QUIET = [
  '--no-sandbox',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-default-apps',
  '--disable-domain-reliability',
  '--disable-sync',
  '--metrics-recording-only',
  '--no-first-run',
  '--no-pings',
  '--host-resolver-rules=MAP * ~NOTFOUND, EXCLUDE localhost, EXCLUDE 127.0.0.1',
]

/** The two widths every page is looked at in. */
export const WIDTHS = { phone: { width: 390, height: 844 }, desk: { width: 1440, height: 900 } } as const

export interface PageOptions {
  baseUrl: string
  size?: keyof typeof WIDTHS | { width: number; height: number }
  colorScheme?: 'light' | 'dark'
  /** Whose cookies it comes with. */
  person?: SignedIn
  javaScript?: boolean
  /** Problems that the test provokes, such as the console's note of a refused sign-in. */
  expected?: RegExp[]
}

export interface TestPage {
  page: Page
  context: BrowserContext
  /** Goes to an address and waits until the page answers to clicks: one before that is lost. */
  open: (path: string) => Promise<void>
  /** What went wrong so far: console errors, uncaught errors, policy reports, requests to elsewhere. */
  problems: () => string[]
  /** Throws when something has. */
  expectNoProblems: () => void
  close: () => Promise<void>
}

export interface TestBrowser {
  browser: Browser
  newPage: (options: PageOptions) => Promise<TestPage>
  /** Ends the browser; throws when any page had a problem that its test did not expect. */
  close: () => Promise<void>
}

/** Opens Debian's chromium. */
export async function openBrowser(): Promise<TestBrowser> {
  const browser = await chromium.launch({ executablePath: CHROMIUM, args: QUIET })
  const pages: TestPage[] = []
  return {
    browser,
    newPage: async (options) => {
      const page = await openPage(browser, options)
      pages.push(page)
      return page
    },
    close: async () => {
      await browser.close()
      for (const page of pages) page.expectNoProblems()
    },
  }
}

async function openPage(browser: Browser, options: PageOptions): Promise<TestPage> {
  const size = options.size ?? 'desk'
  const context = await browser.newContext({
    baseURL: options.baseUrl,
    viewport: typeof size === 'string' ? WIDTHS[size] : size,
    colorScheme: options.colorScheme ?? 'light',
    javaScriptEnabled: options.javaScript ?? true,
    locale: 'en-US',
    timezoneId: 'UTC',
    reducedMotion: 'reduce',
  })
  if (options.person !== undefined) await context.addCookies(options.person.cookies)
  const found: string[] = []
  await context.addInitScript(() => {
    document.addEventListener('securitypolicyviolation', (event) => {
      console.error(`policy violated: ${event.violatedDirective} by ${event.blockedURI}`)
    })
  })
  const page = await context.newPage()
  page.on('console', (message) => {
    const isWrong =
      message.type() === 'error' || (message.type() === 'warning' && /hydrat/i.test(message.text()))
    if (isWrong) found.push(`console: ${message.text()} (${message.location().url})`)
  })
  page.on('pageerror', (error) => found.push(`uncaught: ${error.message}`))
  context.on('request', (request) => {
    if (!isLoopback(request.url())) found.push(`request to elsewhere: ${request.url()}`)
  })

  const problems = () =>
    found.filter((problem) => !(options.expected ?? []).some((pattern) => pattern.test(problem)))
  return {
    page,
    context,
    open: async (path) => {
      await page.goto(path, { waitUntil: 'load' })
      if (options.javaScript !== false) await waitForHydration(page)
    },
    problems,
    expectNoProblems: () => {
      if (problems().length > 0) throw new Error(`the browser met problems:\n${problems().join('\n')}`)
    },
    close: () => context.close(),
  }
}

/** Waits until the framework has taken the served page over. */
export async function waitForHydration(page: Page): Promise<void> {
  await page.waitForFunction(() => {
    const { useNuxtApp } = window as unknown as { useNuxtApp?: () => { isHydrating?: boolean } }
    return useNuxtApp?.().isHydrating === false
  })
}

function isLoopback(address: string): boolean {
  const { protocol, hostname } = new URL(address)
  if (['data:', 'blob:', 'about:'].includes(protocol)) return true
  return ['127.0.0.1', 'localhost', '[::1]'].includes(hostname)
}

/**
 * What axe finds on a page by the rules of WCAG 2.2 A and AA: one line a finding, none on a good page.
 */
export async function findAccessibilityProblems(page: Page): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page })
    .withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'])
    .analyze()
  return violations.flatMap((violation) =>
    violation.nodes.map(
      (node) =>
        `${violation.id}: ${violation.help}\n  ${node.target.join(' ')}\n  ${node.failureSummary ?? ''}`,
    ),
  )
}
