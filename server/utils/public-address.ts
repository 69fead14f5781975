/** Where people reach this installation: `PUBLIC_URL`, or unknown and then plain http. */
export interface PublicAddress {
  /** Such as `https://longpull.example.test`; undefined when not set. */
  origin: string | undefined
  secure: boolean
}

let known: PublicAddress | undefined

/** Read once from the environment. @throws Error when PUBLIC_URL is set and is no http(s) address */
export function publicAddress(): PublicAddress {
  if (known !== undefined) return known
  const text = process.env.PUBLIC_URL
  if (text === undefined || text === '') {
    known = { origin: undefined, secure: false }
    return known
  }
  const url = URL.canParse(text) ? new URL(text) : null
  if (url === null || (url.protocol !== 'https:' && url.protocol !== 'http:'))
    throw new Error('PUBLIC_URL must be an http or https address, such as https://longpull.example.test')
  known = { origin: url.origin, secure: url.protocol === 'https:' }
  return known
}
