/** What lies in the bin, and what has lain there too long to be taken out. */
import { sql, type Column, type SQL } from 'drizzle-orm'
import { BIN_DAYS } from '../../shared/bin'

const lastDay = sql`now() - make_interval(days => ${BIN_DAYS})`
/** In the bin, and can be taken out. */
export const inBin = (deletedAt: Column): SQL => sql`${deletedAt} > ${lastDay}`
/** Outside the bin or in it, but not gone. */
export const isReachable = (deletedAt: Column): SQL => sql`(${deletedAt} is null or ${inBin(deletedAt)})`
