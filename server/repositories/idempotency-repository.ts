import type { Knex } from 'knex'

export interface KeptAnswer {
  requestHash: Buffer
  status: number
  etag: string | null
  text: string | null
}

interface KeyRow {
  request_hash: Buffer
  status: number
  etag: string | null
  answer: string | null
}

interface KeyPlace {
  shopId: string
  route: string
  key: string
}

const at = ({ shopId, route, key }: KeyPlace) => ({ shop_id: shopId, route, key })

/** Claims a key; false when it is taken. Waits for a transaction that is claiming it at the same time. */
export async function claimKey(
  trx: Knex.Transaction,
  place: KeyPlace & { userId: string; requestHash: Buffer },
): Promise<boolean> {
  const rows = await trx('idempotency_keys')
    .insert({ ...at(place), user_id: place.userId, request_hash: place.requestHash })
    .onConflict(['shop_id', 'route', 'key'])
    .ignore()
    .returning('key')
  return rows.length > 0
}

/** Drops keys of the shop that are past their day, so that the table stays as small as a day. */
export async function deleteExpiredKeys(trx: Knex.Transaction, shopId: string): Promise<void> {
  await trx('idempotency_keys')
    .where({ shop_id: shopId })
    .whereRaw(`created_at < now() - interval '24 hours'`)
    .delete()
}

export async function findAnswer(trx: Knex.Transaction, place: KeyPlace): Promise<KeptAnswer | undefined> {
  const row = await trx('idempotency_keys')
    .where(at(place))
    .first<KeyRow | undefined>('request_hash', 'status', 'etag', 'answer')
  return row === undefined
    ? undefined
    : { requestHash: row.request_hash, status: row.status, etag: row.etag, text: row.answer }
}

export async function keepAnswer(
  trx: Knex.Transaction,
  place: KeyPlace,
  answer: { status: number; etag: string | null; text: string | null },
): Promise<void> {
  await trx('idempotency_keys')
    .where(at(place))
    .update({ status: answer.status, etag: answer.etag, answer: answer.text })
}
