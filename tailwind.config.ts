import type { Config } from 'tailwindcss'

/** The only colours, sizes and corners of the product; screens use these names and nothing else. */
export default {
  content: ['./app/**/*.{vue,ts}'],
  theme: {
    colors: {
      'transparent': 'transparent',
      'current': 'currentColor',
      'paper': '#EFF3F3',
      'sheet': '#FFFFFF',
      'ink': '#16211F',
      'soft': '#50605D',
      'faint': '#7C8A87',
      'rule': '#D3DCDA',
      'shade': '#E1E9E7',
      'pen': '#1B4B8F',
      'pen-deep': '#123563',
      'pen-wash': '#E3ECF7',
      'mark': '#C01F3F',
      'mark-wash': '#FBE5E9',
      'moss': '#2F6B4A',
      'moss-wash': '#DFF0E6',
      'amber': '#855600',
      'amber-wash': '#FFF0BF',
      'marker': '#FFE36E',
      'film-mark': '#FF4B6B',
      'night': '#10181A',
      'chalk': '#F1F5F4',
    },
    fontFamily: {
      serif: ['Lora', 'Georgia', 'serif'],
      sans: ['"Public Sans Variable"', 'system-ui', 'sans-serif'],
    },
    fontSize: {
      13: ['13px', '1.45'],
      14: ['14px', '1.5'],
      15: ['15px', '1.5'],
      // Fields on phones: anything smaller makes the browser zoom in.
      16: ['16px', '1.5'],
      18: ['18px', '1.65'],
      21: ['21px', '1.35'],
      28: ['28px', '1.2'],
      38: ['38px', '1.15'],
    },
    borderRadius: {
      none: '0',
      sheet: '4px',
      control: '8px',
      panel: '12px',
      full: '9999px',
    },
    extend: {
      boxShadow: { letter: '0 1px 0 #c6d2cf, 0 18px 40px -28px #16302b55' },
      maxWidth: { letter: '66ch' },
      transitionDuration: { DEFAULT: '150ms' },
      transitionTimingFunction: { DEFAULT: 'ease-out' },
    },
  },
} satisfies Config
