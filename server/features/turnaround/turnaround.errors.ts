import { Refusal } from '#server/refusal'

export function noPromisePossible(): Refusal {
  return new Refusal('wrong-moment', 'no-promise-possible', 'No working hours are set within a year, so no answer can be promised. Choose another coach.')
}
