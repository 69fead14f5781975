import type { CatalogueCooler } from '#shared/schemas/catalogue-cooler'
import { listCoolers } from '../repositories/cooler-repository'
import type { ShopContext } from './context'

export function listCatalogue({ trx, session }: ShopContext): Promise<CatalogueCooler[]> {
  return listCoolers(trx, session.shopId)
}
