/** The eight facts that decide, and why each is asked. */
export const EIGHT_FACTS = [
  { fact: 'Loaded weight', why: 'from a scale ticket, the placard or a guess; a guess widens the band' },
  { fact: 'Tire size', why: 'bigger tires put every speed further from lock-up' },
  { fact: 'Axle ratio', why: 'with the tires it sets how hard the converter must work' },
  { fact: 'Engine', why: 'the nearest of a few kinds, until its own figures are known' },
  { fact: 'Lock-up proven?', why: 'seen on the road or not; it is worth more than any cooler' },
  { fact: 'The hill', why: 'grade, length and speed' },
  { fact: 'Ambient and altitude', why: 'the day it must survive, not the day of the call' },
  { fact: 'Coolers, and where', why: 'what is fitted, in which order, ahead of what' },
] as const
