import { defineEventHandler, setResponseHeader } from 'h3'
import { AppError } from '#shared/errors'
import { answerError } from '../utils/answer'
import { findMethods } from '../utils/api-routes'
import { requireSameSite } from '../utils/cross-site'
import { isApiPath, setSecurityHeaders } from '../utils/headers'
import { notesOf } from '../utils/request-context'

const READING = new Set(['GET', 'HEAD'])

/** First of all for every request: its id, its headers, and whether address, method and origin go together. */
export default defineEventHandler((event) => {
  const path = event.path.split('?', 1)[0] ?? '/'
  const isApi = isApiPath(path)
  setResponseHeader(event, 'x-request-id', notesOf(event).id)
  setSecurityHeaders(event, isApi)
  try {
    const methods = isApi ? findMethods(path) : ['GET', 'HEAD']
    if (methods === undefined) throw new AppError('not_found')
    if (!methods.includes(event.method)) {
      setResponseHeader(event, 'allow', methods.join(', '))
      throw new AppError('method_not_allowed')
    }
    if (!READING.has(event.method)) requireSameSite(event)
  } catch (error) {
    return answerError(event, error)
  }
})
