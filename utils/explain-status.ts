/** What an HTTP status means to somebody who wanted a page, and what to do next. */
export interface StatusExplained {
  title: string
  advice: string
  /** Whether trying once more can help. */
  again: boolean
  /** Whether signing in can help. */
  signIn: boolean
}

const EXPLAINED: Readonly<Record<number, StatusExplained>> = {
  400: {
    title: 'This address does not add up',
    advice: 'Something in it is not what the page expects. Start again from the list of builds.',
    again: false,
    signIn: false,
  },
  401: {
    title: 'Sign in to see this',
    advice: 'The session has ended, or nobody is signed in on this device.',
    again: false,
    signIn: true,
  },
  403: {
    title: 'Your role does not include this',
    advice: 'The owner of the shop decides who sees what. Ask them, or go back to what is open to you.',
    again: false,
    signIn: false,
  },
  404: {
    title: 'There is nothing here',
    advice:
      'The address is wrong, the thing was deleted, or it belongs to another shop. Look for it in the list of builds.',
    again: false,
    signIn: false,
  },
  429: {
    title: 'Too much at once',
    advice: 'Wait a minute, then try again.',
    again: true,
    signIn: false,
  },
  500: {
    title: 'Something went wrong on our side',
    advice:
      'What was saved is safe. Try again; if it stays like this, tell the owner of the shop when it happened.',
    again: true,
    signIn: false,
  },
  503: {
    title: 'The database does not answer right now',
    advice: 'This usually passes within a minute. What was saved is safe. Try again shortly.',
    again: true,
    signIn: false,
  },
}

/** The explanation of a status; unknown ones count as the nearest of their kind. */
export function explainStatus(status: number): StatusExplained {
  const kind = status >= 500 ? 500 : status >= 400 ? 400 : 500
  return EXPLAINED[status] ?? EXPLAINED[kind] ?? (EXPLAINED[500] as StatusExplained)
}
