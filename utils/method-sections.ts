/** The sections of the method page in their order, for its table of contents and its headings. */
export const METHOD_SECTIONS = {
  temperatures: 'Six temperatures',
  road: 'What the road asks',
  gear: 'Which gear, locked or not',
  converter: 'The converter',
  losses: 'Gears, pump and drag',
  air: 'The air',
  coolers: 'The coolers',
  flow: 'The oil flow',
  balances: 'The balances',
  life: 'Fluid life',
  sizing: 'The needed cooler',
  doubt: 'How sure it is',
  oddities: 'What is right though it looks wrong',
  practice: 'Common practice without a source',
  limits: 'What it does not count',
  sources: 'Sources',
  cautions: 'Cautions',
} as const

export type MethodSectionId = keyof typeof METHOD_SECTIONS
