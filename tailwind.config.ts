import type { Config } from 'tailwindcss'
import plugin from 'tailwindcss/plugin'
import { COLORS, TYPE_SCALE } from './utils/tokens'

const names = Object.keys(COLORS.light)
const variables = (theme: Record<string, string>) =>
  Object.fromEntries(Object.entries(theme).map(([name, value]) => [`--${name}`, value]))
const rem = (px: number) => `${px / 16}rem`

/** The theme replaces Tailwind's own colors, sizes and shadows, so that nobody can stray from the tokens. */
export default <Partial<Config>>{
  darkMode: 'class',
  content: ['./app.vue', './error.vue', './{pages,components,layouts,composables,utils}/**/*.{vue,ts}'],
  theme: {
    colors: {
      transparent: 'transparent',
      current: 'currentColor',
      inherit: 'inherit',
      ...Object.fromEntries(names.map((name) => [name, `var(--${name})`])),
    },
    fontFamily: {
      sans: ['Lexend Variable', 'Lexend Fallback', 'system-ui', 'sans-serif'],
      figures: ['Lexend Figures', 'Lexend Variable', 'Lexend Fallback', 'system-ui', 'sans-serif'],
    },
    fontSize: {
      small: [rem(TYPE_SCALE.small), '1.45'],
      base: [rem(TYPE_SCALE.base), '1.55'],
      lead: [rem(TYPE_SCALE.lead), '1.5'],
      head: [rem(TYPE_SCALE.head), '1.25'],
      answer: [rem(TYPE_SCALE.answer), '1.1'],
    },
    fontWeight: { light: '300', normal: '400', medium: '500', strong: '600' },
    borderRadius: { none: '0', DEFAULT: '3px' },
    boxShadow: { none: 'none' },
    dropShadow: { none: 'none' },
    extend: { maxWidth: { page: '76rem', read: '42rem' } },
  },
  plugins: [
    plugin(({ addBase }) => {
      addBase({
        ':root': { ...variables(COLORS.light), colorScheme: 'light' },
        // Paper is white whatever the screen was: dark colors apply to screens only.
        '@media screen': {
          '.dark': { ...variables(COLORS.dark), colorScheme: 'dark' },
        },
        // Before or without the script that sets the class.
        '@media screen and (prefers-color-scheme: dark)': {
          ':root:not(.light):not(.dark)': { ...variables(COLORS.dark), colorScheme: 'dark' },
        },
      })
    }),
  ],
}
