import { AppError } from '#shared/errors'
import { claimKey, deleteExpiredKeys, findAnswer, keepAnswer } from '../repositories/idempotency-repository'
import type { ShopContext } from './context'

/** An answer as it went out, so that a repeat is the same to the byte. */
export interface KeptReply {
  status: number
  etag: string | null
  text: string | null
}

export interface RepeatableRequest {
  route: string
  /** The caller's own key, where it sent one. */
  key: string | undefined
  /** The key that the row's own id makes, used otherwise. */
  rowKey: string
  requestHash: Buffer
}

/**
 * Does a creating request once: key, hash and answer are kept in the transaction of the effect for 24 hours. The same
 * request again gets the first answer; at the same time, it waits for the first.
 *
 * @throws idempotency_key_reused when the key came with another request; conflict when the row's id did
 */
export async function once(
  { trx, session }: ShopContext,
  request: RepeatableRequest,
  work: () => Promise<KeptReply>,
): Promise<KeptReply> {
  const place = { shopId: session.shopId, route: request.route, key: request.key ?? request.rowKey }
  await deleteExpiredKeys(trx, session.shopId)
  if (await claimKey(trx, { ...place, userId: session.userId, requestHash: request.requestHash })) {
    const reply = await work()
    await keepAnswer(trx, place, reply)
    return reply
  }
  const kept = await findAnswer(trx, place)
  if (kept === undefined) throw new AppError('conflict')
  if (!kept.requestHash.equals(request.requestHash)) {
    if (request.key !== undefined) throw new AppError('idempotency_key_reused')
    throw new AppError('conflict', {
      message: 'This id was already used for something else. Make a new id and send it again.',
    })
  }
  return { status: kept.status, etag: kept.etag, text: kept.text }
}
