import type { H3Event } from 'h3'
import { getRequestHeader } from 'h3'
import { AppError } from '#shared/errors'

/**
 * The version a change is meant for, from `If-Match: "3"`.
 * @throws version_missing without the header; bad_input for anything but one version (`*` would overwrite blindly)
 */
export function requireVersion(event: H3Event): number {
  const text = getRequestHeader(event, 'if-match')
  if (text === undefined || text.trim() === '') throw new AppError('version_missing')
  const digits = /^(?:W\/)?"?([1-9][0-9]{0,8})"?$/.exec(text.trim())?.[1]
  if (digits === undefined)
    throw new AppError('bad_input', {
      issues: [{ path: 'If-Match', message: 'must be the version the answer had as its ETag, such as "3"' }],
    })
  return Number(digits)
}
