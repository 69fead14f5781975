import { describe, expect, it } from 'vitest'
import { linearAxis } from '../../../shared/charts/axis'
import {
  chartFormats,
  formatDuration,
  formatGiven,
  formatGrade,
  formatGradeHeld,
} from '../../../shared/charts/formats'

describe('linearAxis', () => {
  it('puts its ticks on round numbers of the person’s unit, not of SI', () => {
    const request = {
      extent: [60, 150] as [number, number],
      range: [200, 0] as [number, number],
      tickCount: 5,
    }
    const us = linearAxis({ ...request, unit: chartFormats('us').temperatureAxis })
    expect(us.ticks.map(({ label }) => label)).toEqual(['100', '150', '200', '250', '300', '350'])
    expect(us.unit).toBe('°F')
    const metric = linearAxis({ ...request, unit: chartFormats('metric').temperatureAxis })
    expect(metric.ticks.map(({ label }) => label)).toEqual(['60', '80', '100', '120', '140', '160'])
  })

  it('draws a flat series in the middle instead of dividing by nothing', () => {
    const axis = linearAxis({
      extent: [80, 80],
      range: [100, 0],
      unit: chartFormats('metric').temperatureAxis,
      tickCount: 4,
    })
    expect(axis.at(80)).toBe(50)
    expect(Number.isFinite(axis.ticks[0]?.position)).toBe(true)
  })

  it('finds the value under a pixel', () => {
    const axis = linearAxis({
      extent: [0, 100],
      range: [0, 500],
      unit: chartFormats('us').temperatureAxis,
      tickCount: 5,
      roundEnds: false,
    })
    expect(axis.invert(axis.at(37))).toBeCloseTo(37, 9)
  })
})

describe('words of a chart', () => {
  it('says given numbers without zeros that claim precision', () => {
    expect(formatGiven(20.1168, 'speed', 'us')).toBe('45.0 mph'.replace('.0 ', '\u00a0'))
    expect(formatGiven(8046.72, 'distance', 'us')).toBe('5\u00a0mi')
    expect(formatGiven(8851.392, 'distance', 'us')).toBe('5.5\u00a0mi')
    expect(formatGiven(100_000, 'mass', 'metric')).toBe('100,000\u00a0kg')
  })

  it('never rounds a promised grade up', () => {
    expect(formatGrade(0.0629)).toBe('6.3 %')
    expect(formatGradeHeld(0.0629)).toBe('6.2 %')
    expect(formatGradeHeld(0.07)).toBe('7 %')
    expect(formatGradeHeld(0)).toBe('0 %')
  })

  it('says time as a clock would', () => {
    expect(formatDuration(45)).toBe('45 s')
    expect(formatDuration(400)).toBe('7 min')
    expect(formatDuration(7500)).toBe('2 h 05 min')
  })
})
