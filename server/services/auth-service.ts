import { createHash } from 'node:crypto'
import { v7 as createId } from 'uuid'
import { AppError } from '#shared/errors'
import type { Me, MeUpdate, SignIn } from '#shared/schemas/auth'
import { beginSession, withoutShop, withShop, SessionRefused, type ShopSession } from '../db/with-shop'
import {
  countAttempt,
  endSession,
  findSignIn,
  forgiveAttempts,
  openSession,
  replacePasswordHash,
  updateProfile,
  type SignInRow,
} from '../repositories/auth-repository'
import { recordAct } from './audit'
import type { ShopContext } from './context'
import { Gate } from './gate'
import { hashPassword, needsRehash, verifyPassword } from './passwords'

/**
 * Wrong passwords allowed within a quarter of an hour: for one account from one address, and for one address over all
 * accounts. An account is never locked as such, so nobody can lock another person out.
 */
const SIGN_IN_LIMITS = { withinS: 15 * 60, perAccountAndAddress: 10, perAddress: 100 } as const

/** Two hashes at a time leave the other threads to files and names; eight wait at most a second or so. */
const hashing = new Gate(2, 8, 2)

export interface SignInOrigin {
  peer: string
  userAgent: string
  requestId: string
  tokenHash: Buffer
  /** The session of the cookie the request came with, if any; it ends with the new one's start. */
  replacedTokenHash: Buffer | undefined
}

function describeMe(session: ShopSession): Me {
  return {
    user: {
      id: session.userId,
      name: session.userName,
      email: session.email,
      unitSystem: session.unitSystem,
      theme: session.theme,
    },
    shop: { id: session.shopId, name: session.shopName, unitSystem: session.shopUnitSystem },
    role: session.role,
  }
}

/** A bucket of attempts is known by a hash, so that the table of attempts lists nobody's address. */
const bucketOf = (...parts: string[]): Buffer => createHash('sha256').update(parts.join('\n')).digest()

const bucketsOf = (email: string, peer: string) => [
  // A right password clears the account's count, but only itself from the address's: otherwise whoever has one account
  // could guess at others for ever.
  {
    bucket: bucketOf('account', email, peer),
    most: SIGN_IN_LIMITS.perAccountAndAddress,
    forgiven: SIGN_IN_LIMITS.perAccountAndAddress,
  },
  { bucket: bucketOf('address', peer), most: SIGN_IN_LIMITS.perAddress, forgiven: 1 },
]

/**
 * Checks e-mail and password and opens a session. An unknown address gets the same answer after the same work as a
 * wrong password. Every attempt counts from its start and a right one is forgiven, so that the limit is exact however
 * many arrive at once, over all processes.
 *
 * @throws wrong_credentials; too_many_requests over the limit, or when too many sign in at once
 */
export async function signIn({ email, password }: SignIn, from: SignInOrigin): Promise<Me> {
  return hashing.run(async () => {
    const found = await withoutShop(async (trx) => {
      for (const { bucket, most } of bucketsOf(email, from.peer)) {
        const waitS = await countAttempt(trx, { bucket, most, withinS: SIGN_IN_LIMITS.withinS })
        if (waitS > 0) return { waitS }
      }
      return { person: await findSignIn(trx, email) }
    })
    if (found.waitS !== undefined)
      throw new AppError('too_many_requests', {
        message: 'Too many wrong passwords from here. Wait a few minutes and try again.',
        retryAfterS: found.waitS,
      })
    const fits = await verifyPassword(found.person?.passwordHash, password)
    if (found.person === undefined || !fits) throw new AppError('wrong_credentials')
    const former = found.person.passwordHash
    const renewed = needsRehash(former) ? await hashPassword(password) : undefined
    return admit(found.person, { email, renewed }, from)
  })
}

async function admit(
  person: SignInRow,
  { email, renewed }: { email: string; renewed: string | undefined },
  from: SignInOrigin,
): Promise<Me> {
  return withoutShop(async (trx) => {
    for (const { bucket, forgiven } of bucketsOf(email, from.peer))
      await forgiveAttempts(trx, bucket, forgiven)
    if (renewed !== undefined)
      await replacePasswordHash(trx, { userId: person.userId, former: person.passwordHash, next: renewed })
    await openSession(trx, { ...from, shopId: person.shopId, id: createId(), userId: person.userId })
    const session = await beginSession(trx, from.tokenHash)
    await recordAct({ trx, session, requestId: from.requestId }, 'session.open', {
      kind: 'session',
      id: session.sessionId,
    })
    return describeMe(session)
  })
}

/** Ends the session for good, wherever its cookie may have been copied to. A dead session is simply dead. */
export async function signOut(tokenHash: Buffer | undefined, requestId: string): Promise<void> {
  if (tokenHash === undefined) return
  try {
    await withShop(tokenHash, async (trx, session) => {
      await endSession(trx, tokenHash)
      await recordAct({ trx, session, requestId }, 'session.close', {
        kind: 'session',
        id: session.sessionId,
      })
    })
  } catch (error) {
    if (!(error instanceof SessionRefused)) throw error
  }
}

export function getMe({ session }: ShopContext): Me {
  return describeMe(session)
}

/** A person's own units and theme. */
export async function updateMe(shop: ShopContext, change: MeUpdate): Promise<Me> {
  await updateProfile(shop.trx, { unitSystem: change.unitSystem, theme: change.theme })
  return describeMe({
    ...shop.session,
    unitSystem: change.unitSystem ?? shop.session.unitSystem,
    theme: change.theme ?? shop.session.theme,
  })
}
