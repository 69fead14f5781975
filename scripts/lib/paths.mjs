// @ts-check
import { fileURLToPath } from 'node:url'

/** The checkout this file belongs to, without a slash at its end. */
export const rootFolder = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '')
