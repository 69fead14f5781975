/**
 * The colors, sizes and weights of the program: the one place where they are written down. Tailwind turns them into CSS
 * variables, tests/unit/utils/contrast.test.ts checks every pair that is used.
 */
export const COLORS = {
  light: {
    /** The page. */
    ground: '#F5F6F3',
    /** What lies on the page: fields, tables, sheets. */
    sheet: '#FFFFFF',
    /** A row under the pointer, a chosen segment. */
    wash: '#E9EDE8',
    ink: '#17211D',
    quiet: '#55625C',
    /** Hairlines that only arrange; nothing depends on seeing them. */
    rule: '#D5DAD5',
    /** The outline of a control: must be seen, so 3:1. */
    edge: '#7A847F',
    action: '#0E5A6B',
    'action-strong': '#0A4351',
    /** Text on a filled action. */
    'on-action': '#FFFFFF',
    'heat-fine': '#2B3A34',
    'heat-watch': '#6B4A2B',
    'heat-ease': '#A34A1C',
    'heat-stop': '#8E1B16',
  },
  dark: {
    ground: '#10171A',
    sheet: '#172024',
    wash: '#202C31',
    ink: '#E6ECE8',
    quiet: '#9AA9A3',
    rule: '#2B373B',
    edge: '#6F7E7A',
    action: '#6CC3D3',
    'action-strong': '#9BDCE7',
    'on-action': '#10171A',
    'heat-fine': '#DCE5E0',
    'heat-watch': '#D9B48A',
    'heat-ease': '#E58A55',
    'heat-stop': '#FF7A6B',
  },
} as const

export type ColorName = keyof (typeof COLORS)['light']

/** Every pair of colors that stands on another: what is read needs 4.5:1, what is only seen (lines, rings) 3:1. */
export const COLOR_PAIRS: readonly { front: ColorName; back: ColorName; kind: 'text' | 'mark' }[] = [
  ...(['ground', 'sheet', 'wash'] as const).flatMap((back) => [
    ...(
      [
        'ink',
        'quiet',
        'action',
        'action-strong',
        'heat-fine',
        'heat-watch',
        'heat-ease',
        'heat-stop',
      ] as const
    ).map((front) => ({ front, back, kind: 'text' as const })),
    { front: 'edge' as const, back, kind: 'mark' as const },
  ]),
  { front: 'on-action', back: 'action', kind: 'text' },
  { front: 'on-action', back: 'action-strong', kind: 'text' },
]

/** The one scale of type, in pixels at the browser's default size. */
export const TYPE_SCALE = { small: 13, base: 15, lead: 18, head: 24, answer: 36 } as const
