import type { Material } from './body-shapes'

/** What an invented golfer wears; colours of the product, muted as cloth is. */
export type Outfit = Readonly<Record<Material | 'trim' | 'buckle', string>>

const COMMON = {
  belt: '#2A2522', buckle: '#C8CDCB', shoe: '#20282A', grip: '#1C2426', shaft: '#E4E9EA', head: '#59666A', hair: '#4A3B30', glove: '#F4F3EE',
} as const

export const OUTFITS = {
  joel: { ...COMMON, shirt: '#E9E4D6', sleeve: '#E9E4D6', trim: '#1B4B8F', trousers: '#2F3B44', cap: '#34475A', skin: '#C99C78' },
  noor: { ...COMMON, shirt: '#2C5C9E', sleeve: '#2C5C9E', trim: '#EFF3F3', trousers: '#D6D0C0', cap: '#F1F1EB', skin: '#A8744F', hair: '#241C18', shoe: '#E6E4DC' },
  wen: { ...COMMON, shirt: '#3B7A59', sleeve: '#3B7A59', trim: '#F1F5F4', trousers: '#3A4347', cap: '#E9E4D6', skin: '#D8AE8B', hair: '#2B2624' },
} satisfies Record<string, Outfit>

export type OutfitName = keyof typeof OUTFITS
