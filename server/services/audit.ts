import { v7 as createId } from 'uuid'
import { insertAuditEvent, type AuditEvent } from '../repositories/audit-repository'
import type { ShopContext } from './context'

/** Writes down an act in its own transaction: who, what, on which row, by which request. */
export async function recordAct(
  { trx, session, requestId }: ShopContext,
  action: string,
  subject: { kind: string; id: string },
  detail: AuditEvent['detail'] = {},
): Promise<void> {
  await insertAuditEvent(trx, {
    shopId: session.shopId,
    id: createId(),
    userId: session.userId,
    action,
    subjectKind: subject.kind,
    subjectId: subject.id,
    requestId,
    detail,
  })
}
