import { createHash } from 'node:crypto'
import type { EventHandler, H3Event } from 'h3'
import {
  defineEventHandler,
  getQuery,
  getRequestHeader,
  getRouterParams,
  setResponseHeader,
  setResponseStatus,
} from 'h3'
import { z } from 'zod'
import { listIssues } from '#shared/build-sheet'
import { AppError } from '#shared/errors'
import { isAllowed, type Action } from '#shared/permissions'
import { withShop } from '../db/with-shop'
import type { ShopContext } from '../services/context'
import { once, type KeptReply } from '../services/idempotency'
import { answerError, type Reply } from './answer'
import { parseJson, readBodyBytes } from './read-body'
import { notesOf } from './request-context'
import { readTokenHash } from './session-cookie'

const MEGABYTE = 1_000_000
const MOST_ISSUES = 50
const NothingSchema = z.strictObject({})

type Parsed<S extends z.ZodType | undefined> = S extends z.ZodType ? z.output<S> : undefined

interface Shape<
  P extends z.ZodType | undefined,
  Q extends z.ZodType | undefined,
  B extends z.ZodType | undefined,
> {
  /** Parameters of the path; one that cannot be an id is an address at which there is nothing. */
  params?: P
  query?: Q
  body?: B
  bodyLimitBytes?: number
}

interface Input<
  P extends z.ZodType | undefined,
  Q extends z.ZodType | undefined,
  B extends z.ZodType | undefined,
> {
  event: H3Event
  params: Parsed<P>
  query: Parsed<Q>
  body: Parsed<B>
}

/** What a field is told where its schema has no words of its own. */
const explainIssue: z.core.$ZodErrorMap = (issue) => {
  if (issue.code !== 'invalid_type') return undefined
  const wanted =
    issue.expected === 'object' ? 'an object' : issue.expected === 'array' ? 'a list' : `a ${issue.expected}`
  return issue.input === undefined ? `is missing; it takes ${wanted}` : `must be ${wanted}`
}

function parse(schema: z.ZodType, value: unknown): unknown {
  const parsed = schema.safeParse(value, { error: explainIssue })
  if (parsed.success) return parsed.data
  const issues = listIssues(parsed.error).slice(0, MOST_ISSUES)
  throw new AppError('bad_input', {
    issues: issues.map(({ path, message }) => ({ path: path === '' ? 'body' : path, message })),
  })
}

function readInput<
  P extends z.ZodType | undefined,
  Q extends z.ZodType | undefined,
  B extends z.ZodType | undefined,
>(event: H3Event, shape: Shape<P, Q, B>, bytes: Buffer | undefined): Input<P, Q, B> {
  const params = shape.params?.safeParse(getRouterParams(event))
  if (params?.success === false) throw new AppError('not_found')
  const query = parse(shape.query ?? NothingSchema, getQuery(event))
  const body =
    shape.body === undefined || bytes === undefined ? undefined : parse(shape.body, parseJson(bytes))
  return { event, params: params?.data, query, body } as Input<P, Q, B>
}

function readBytes(
  event: H3Event,
  shape: { body?: z.ZodType; bodyLimitBytes?: number },
): Promise<Buffer> | undefined {
  return shape.body === undefined ? undefined : readBodyBytes(event, shape.bodyLimitBytes ?? MEGABYTE)
}

function send(event: H3Event, reply: KeptReply): string | null {
  setResponseStatus(event, reply.status)
  if (reply.etag !== null) setResponseHeader(event, 'etag', reply.etag)
  if (reply.text === null) return null
  setResponseHeader(event, 'content-type', 'application/json')
  return reply.text
}

function toKept({ status, body, version }: Reply): KeptReply {
  return {
    status,
    etag: version === undefined ? null : `"${version}"`,
    text: body === undefined ? null : JSON.stringify(body),
  }
}

function handle(work: (event: H3Event) => Promise<KeptReply>): EventHandler {
  return defineEventHandler(async (event) => {
    try {
      return send(event, await work(event))
    } catch (error) {
      return answerError(event, error)
    }
  })
}

/** Opens the transaction of the session behind the cookie and sees to it that its role includes the action. */
async function asPerson<T>(
  event: H3Event,
  action: Action,
  work: (shop: ShopContext) => Promise<T>,
): Promise<T> {
  const notes = notesOf(event)
  notes.action = action
  const tokenHash = await readTokenHash(event)
  if (tokenHash === undefined) throw new AppError('not_signed_in')
  return withShop(tokenHash, async (trx, session) => {
    notes.shopId = session.shopId
    notes.userId = session.userId
    if (!isAllowed(session.role, action)) throw new AppError('not_allowed')
    return work({ trx, session, requestId: notes.id })
  })
}

async function requireCookie(event: H3Event): Promise<void> {
  if ((await readTokenHash(event)) === undefined) throw new AppError('not_signed_in')
}

/** A call without a session: signing in, probes. */
export function definePublicApi<
  P extends z.ZodType | undefined = undefined,
  Q extends z.ZodType | undefined = undefined,
  B extends z.ZodType | undefined = undefined,
>(api: Shape<P, Q, B> & { handler: (input: Input<P, Q, B>) => Promise<Reply> }): EventHandler {
  return handle(async (event) =>
    toKept(await api.handler(readInput(event, api, await readBytes(event, api)))),
  )
}

/**
 * A call on a shop's rows: session, then permission, then input, then the handler, all in one transaction that commits
 * before the answer is sent. `creates` makes it safe to repeat: by the `Idempotency-Key` of the request, or else by the
 * id of the row in its body.
 */
export function defineShopApi<
  P extends z.ZodType | undefined = undefined,
  Q extends z.ZodType | undefined = undefined,
  B extends z.ZodType | undefined = undefined,
>(
  api: Shape<P, Q, B> & {
    action: Action
    creates?: boolean
    handler: (shop: ShopContext, input: Input<P, Q, B>) => Promise<Reply>
  },
): EventHandler {
  return handle(async (event) => {
    await requireCookie(event)
    const bytes = await readBytes(event, api)
    return asPerson(event, api.action, async (shop) => {
      const input = readInput(event, api, bytes)
      const work = async () => toKept(await api.handler(shop, input))
      if (api.creates !== true) return work()
      return once(shop, describeRequest(event, input.body), work)
    })
  })
}

/** A call that computes and keeps nothing: who asks is checked in a transaction, the computing happens after it. */
export function defineComputeApi<
  Q extends z.ZodType | undefined = undefined,
  B extends z.ZodType | undefined = undefined,
>(
  api: Shape<undefined, Q, B> & { action: Action; compute: (input: Input<undefined, Q, B>) => object },
): EventHandler {
  return handle(async (event) => {
    await requireCookie(event)
    const bytes = await readBytes(event, api)
    await asPerson(event, api.action, async () => undefined)
    return toKept({ status: 200, body: api.compute(readInput(event, api, bytes)) })
  })
}

function describeRequest(event: H3Event, body: unknown): Parameters<typeof once>[1] {
  const key = getRequestHeader(event, 'idempotency-key')
  if (key !== undefined && !/^[\x21-\x7e]{1,200}$/.test(key))
    throw new AppError('bad_input', {
      issues: [{ path: 'Idempotency-Key', message: 'must be 1 to 200 printable characters without spaces' }],
    })
  const id: unknown = typeof body === 'object' && body !== null && 'id' in body ? body.id : undefined
  return {
    route: `${event.method} ${event.path.split('?', 1)[0] ?? ''}`,
    key: key === undefined ? undefined : `key:${key}`,
    rowKey: `id:${String(id)}`,
    requestHash: createHash('sha256').update(JSON.stringify(body)).digest(),
  }
}
