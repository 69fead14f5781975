import { once } from 'node:events'
import { createServer, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import {
  findAccessibilityProblems,
  openBrowser,
  type PageOptions,
  type TestBrowser,
} from '../support/browser'

/** Pages that do what the other browser tests rely on being told about. */
const PAGES: Record<string, string> = {
  '/good': '<main><h1>Nothing wrong here</h1></main>',
  '/console': '<script>console.error("a complaint")</script>',
  '/uncaught': '<script>setTimeout(() => { throw new Error("nobody caught this") }, 0)</script>',
  '/policy': '<img src="data:image/gif;base64,R0lGODlhAQABAAAAACw=" alt="">',
  '/elsewhere': '<link rel="stylesheet" href="http://elsewhere.test/style.css">',
  '/pale': '<main><h1>Heading</h1><p style="color: #ddd; background: #fff">Hardly to be read</p></main>',
}

describe('the browser harness', () => {
  let server: Server
  let baseUrl: string
  let browser: TestBrowser

  beforeAll(async () => {
    server = createServer((request, response) => {
      response.setHeader('content-type', 'text/html')
      response.setHeader(
        'content-security-policy',
        "default-src 'unsafe-inline'; img-src 'self'; style-src 'unsafe-inline' http://elsewhere.test",
      )
      const body = PAGES[request.url ?? ''] ?? ''
      response.end(
        `<!doctype html><html lang="en"><title>Page</title><link rel="icon" href="/icon">${body}</html>`,
      )
    }).listen(0, '127.0.0.1')
    await once(server, 'listening')
    baseUrl = `http://127.0.0.1:${(server.address() as AddressInfo).port}`
    browser = await openBrowser()
  })

  afterAll(async () => {
    await browser.browser.close()
    server.close()
  })

  /** Looks at a page; the browser stays open, since its closing would fail for the pages made to be wrong. */
  async function look(path: string, options: Partial<PageOptions> = {}) {
    const tested = await browser.newPage({ baseUrl, ...options })
    await tested.page.goto(path, { waitUntil: 'networkidle' })
    return tested
  }

  it('finds nothing on a good page', async () => {
    const { page, problems } = await look('/good')
    expect(problems()).toEqual([])
    expect(await findAccessibilityProblems(page)).toEqual([])
  })

  it.each([
    ['/console', /^console: a complaint/],
    ['/uncaught', /^uncaught: nobody caught this/],
    ['/policy', /policy violated: img-src/],
    ['/elsewhere', /^request to elsewhere: http:\/\/elsewhere\.test\/style\.css/],
  ])('reports what %s does', async (path, pattern) => {
    expect((await look(path)).problems()).toContainEqual(expect.stringMatching(pattern))
  })

  it('passes over what a test provokes on purpose', async () => {
    expect((await look('/console', { expected: [/a complaint/] })).problems()).toEqual([])
  })

  it('fails at the end of a browser whose page had a problem', async () => {
    const another = await openBrowser()
    const { page } = await another.newPage({ baseUrl })
    await page.goto('/console', { waitUntil: 'networkidle' })
    await expect(another.close()).rejects.toThrow('a complaint')
  })

  it('finds text that is too pale', async () => {
    const { page } = await look('/pale')
    expect(await findAccessibilityProblems(page)).toContainEqual(expect.stringMatching(/^color-contrast/))
  })
})
