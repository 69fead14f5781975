/** The published works the model rests on, by what they are used for. How far each was seen is in docs/sources.md. */
export const METHOD_SOURCES = [
  {
    use: 'Road load, rolling',
    work: 'T. D. Gillespie, Fundamentals of Vehicle Dynamics, 1992, chapter 4 and table 4.1.',
  },
  { use: 'Atmosphere', work: 'ISO 2533:1975, Standard atmosphere, troposphere layer.' },
  { use: 'Engine at altitude', work: 'SAE J1349, correction of naturally aspirated spark-ignition engines.' },
  {
    use: 'Drag of a transmission',
    work: 'Commission Regulation (EU) 2017/2400, annex VI: the form of the torque-independent loss. Its size is judgment.',
  },
  { use: 'Oil viscosity', work: 'ASTM D341, viscosity-temperature equation for liquid petroleum products.' },
  {
    use: 'Oil and exchangers',
    work: 'Incropera, DeWitt, Bergman and Lavine, Fundamentals of Heat and Mass Transfer, 6th ed.: tables A.4 and A.5, section 11.4, equation 11.32.',
  },
  { use: 'Compact coolers', work: 'W. M. Kays and A. L. London, Compact Heat Exchangers, 3rd ed.' },
  { use: 'A measured oil cooler', work: 'W. S. Janna, Engineering Heat Transfer, example 9.7.' },
  { use: 'Coolant', work: 'ASHRAE Handbook, Fundamentals, physical properties of secondary coolants.' },
  {
    use: 'Friction in lines',
    work: 'S. W. Churchill, Friction-factor equation spans all fluid-flow regimes, Chemical Engineering 84(24), 1977, 91–92.',
  },
  { use: 'Fittings', work: 'F. M. White, Fluid Mechanics, 7th ed., section 6.9.' },
  {
    use: 'Curves through points',
    work: 'F. N. Fritsch and J. Butland, SIAM Journal on Scientific and Statistical Computing 5, 1984, 300–304.',
  },
  {
    use: 'Integration',
    work: 'A. Sandu and others, Benchmarking stiff ODE solvers for atmospheric chemistry problems II, Atmospheric Environment 31, 1997, 3459–3472.',
  },
  { use: 'Units', work: 'NIST Special Publication 811, 2008, appendix B.8.' },
] as const

/** Where somebody can be hurt. */
export const METHOD_CAUTIONS = [
  {
    title: 'Hot fluid and pressure',
    text: 'Transmission fluid on a pull burns skin. A burst cooler hose on an exhaust can start a fire. Never open the cap of a hot cooling system.',
  },
  { title: 'Fans', text: 'Electric fans start with the engine off. Unplug them before reaching in.' },
  {
    title: 'Lifting',
    text: 'Stands hold a truck, a jack does not. Chock the wheels that stay on the ground.',
  },
  {
    title: 'Stall tests',
    text: 'Chocks, brakes, a clear area, and at most 5 seconds or the limit of the maker, whichever is less. Then let it cool.',
  },
  {
    title: 'Road tests',
    text: 'A passenger writes down the readings; the driver never does. Mind the brakes on the way down: a long grade fades them.',
  },
  {
    title: 'Refrigerant',
    text: 'Work on the air-conditioning circuit is for licensed people with recovery equipment. It is never vented.',
  },
  {
    title: 'Used fluid',
    text: 'Keep it in sound containers labeled “used oil” and hand it to a collection point. Local rules decide.',
  },
] as const
