import type { Config } from 'tailwindcss'
import { tailwindColors } from './shared/design/tokens'

export default {
  content: ['./app/**/*.{vue,ts}'],
  darkMode: ['selector', '[data-theme="dark"]'],
  theme: {
    colors: tailwindColors,
    fontFamily: { sans: ['"Noto Sans"', '"Noto Sans Math"', 'sans-serif'] },
    extend: {
      borderRadius: { none: '0', sm: '2px' },
      maxWidth: { page: '88rem', text: '42rem' },
    },
  },
} satisfies Config
