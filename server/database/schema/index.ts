import type { MoneyArea } from './money'
import type { OffersArea } from './offers'
import type { PeopleArea } from './people'
import type { ReviewsArea } from './reviews'
import type { RunningArea } from './running'
import type { TurnaroundArea } from './turnaround'

/** Every table, by area. */
export interface Tables extends PeopleArea, OffersArea, MoneyArea, ReviewsArea, TurnaroundArea, RunningArea {}
