import { ownerConfig } from './server/db/config'

export default ownerConfig()
