import type { Config } from 'tailwindcss'

export default <Partial<Config>>{
  darkMode: 'class',
  content: ['./app.vue', './error.vue', './{pages,components,layouts,composables,utils}/**/*.{vue,ts}'],
}
