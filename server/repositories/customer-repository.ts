import type { Knex } from 'knex'
import type { CustomerCreate } from '#shared/schemas/customer'

export interface CustomerRow {
  id: string
  name: string
  phone: string | null
  email: string | null
}

/** Adds a customer unless the shop has one of this id already. */
export async function insertCustomer(
  trx: Knex.Transaction,
  shopId: string,
  customer: CustomerCreate,
  createdBy: string,
): Promise<void> {
  await trx('customers')
    .insert({
      shop_id: shopId,
      id: customer.id,
      name: customer.name,
      phone: customer.phone ?? null,
      email: customer.email ?? null,
      created_by: createdBy,
    })
    .onConflict(['shop_id', 'id'])
    .ignore()
}

export function findCustomer(
  trx: Knex.Transaction,
  shopId: string,
  id: string,
): Promise<CustomerRow | undefined> {
  return trx('customers')
    .where({ shop_id: shopId, id })
    .first<CustomerRow | undefined>('id', 'name', 'phone', 'email')
}
