/** A club as it is being typed: measures are text until they are sent. */
export interface TypedClub {
  club: string
  length: string
  lie: string
  carry: string
}
