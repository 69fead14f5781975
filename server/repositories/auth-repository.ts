import type { Knex } from 'knex'

/** What signing in asks the database for: all through functions, since the serving role has no right on the tables. */

export interface SignInRow {
  userId: string
  shopId: string
  passwordHash: string
}

/** Counts one attempt. @returns 0 while it is within the limit, else the seconds to wait */
export async function countAttempt(
  trx: Knex.Transaction,
  attempt: { bucket: Buffer; most: number; withinS: number },
): Promise<number> {
  const answer = await trx.raw<{ rows: { wait: number }[] }>(
    'select app.count_attempts(?, ?, make_interval(secs => ?)) as wait',
    [attempt.bucket, attempt.most, attempt.withinS],
  )
  return answer.rows[0]?.wait ?? 0
}

/** Takes attempts off a count that turned out to be right ones. */
export async function forgiveAttempts(
  trx: Knex.Transaction,
  bucket: Buffer,
  forgiven: number,
): Promise<void> {
  await trx.raw('select app.forgive_attempts(?, ?)', [bucket, forgiven])
}

export async function findSignIn(trx: Knex.Transaction, email: string): Promise<SignInRow | undefined> {
  const answer = await trx.raw<{ rows: { user_id: string; shop_id: string; password_hash: string }[] }>(
    'select * from app.find_sign_in(?)',
    [email],
  )
  const row = answer.rows[0]
  return row === undefined
    ? undefined
    : { userId: row.user_id, shopId: row.shop_id, passwordHash: row.password_hash }
}

export async function openSession(
  trx: Knex.Transaction,
  session: {
    shopId: string
    id: string
    userId: string
    tokenHash: Buffer
    peer: string
    userAgent: string
    replacedTokenHash: Buffer | undefined
  },
): Promise<void> {
  await trx.raw('select app.open_session(?, ?, ?, ?, ?, ?, ?)', [
    session.shopId,
    session.id,
    session.userId,
    session.tokenHash,
    session.peer,
    session.userAgent,
    session.replacedTokenHash ?? null,
  ])
}

export async function endSession(trx: Knex.Transaction, tokenHash: Buffer): Promise<void> {
  await trx.raw('select app.end_session(?)', [tokenHash])
}

export async function replacePasswordHash(
  trx: Knex.Transaction,
  change: { userId: string; former: string; next: string },
): Promise<void> {
  await trx.raw('select app.replace_password_hash(?, ?, ?)', [change.userId, change.former, change.next])
}

export async function updateProfile(
  trx: Knex.Transaction,
  change: { unitSystem: string | undefined; theme: string | undefined },
): Promise<void> {
  await trx.raw('select app.update_profile(?, ?)', [change.unitSystem ?? null, change.theme ?? null])
}
