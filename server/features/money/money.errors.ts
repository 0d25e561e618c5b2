import { Refusal } from '#server/refusal'

export function priceChanged(): Refusal {
  return new Refusal('wrong-moment', 'price-changed', 'The price changed while you were here. Nothing was charged; look at the new one and go on if you like.')
}

export function notSoldNow(): Refusal {
  return new Refusal('wrong-moment', 'not-sold-now', 'This coach could not keep that promise at the moment. Nothing was charged; choose another coach, or come back later.')
}

export function providerUnavailable(): Refusal {
  return new Refusal('unavailable', 'provider-unavailable', 'The card page does not answer at the moment. Nothing was charged and nothing was lost; try again in a minute.', undefined, 60)
}
