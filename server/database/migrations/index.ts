import type { Migration } from 'kysely'
import { money } from './007_money'
import { film } from './006_film'
import { offers } from './002_offers'
import { people } from './001_people'
import { reviews } from './003_reviews'
import { running } from './005_running'
import { turnaround } from './004_turnaround'

/** Imported one by one: the built server is a bundle and has no folder to read. Names are never changed once shipped. */
export const migrations: Record<string, Migration> = {
  '001_people': people,
  '002_offers': offers,
  '003_reviews': reviews,
  '004_turnaround': turnaround,
  '005_running': running,
  '006_film': film,
  '007_money': money,
}
