import type { Knex } from 'knex'

export interface AuditEvent {
  shopId: string
  id: string
  userId: string
  action: string
  subjectKind: string
  subjectId: string
  requestId: string
  detail: Record<string, string | number | string[]>
}

export async function insertAuditEvent(trx: Knex.Transaction, event: AuditEvent): Promise<void> {
  await trx('audit_events').insert({
    shop_id: event.shopId,
    id: event.id,
    user_id: event.userId,
    action: event.action,
    subject_kind: event.subjectKind,
    subject_id: event.subjectId,
    request_id: event.requestId,
    detail: JSON.stringify(event.detail),
  })
}
