import { createRequire } from 'node:module'

/**
 * Packages whose type declarations are missing or incomplete, loaded with the little that the tests call.
 * odex: the extrapolation integrator ODEX of Hairer and Wanner. psychrolib: ASHRAE psychrometrics.
 */
const load = createRequire(import.meta.url)

export interface OdexSolver {
  absoluteTolerance: number | number[]
  relativeTolerance: number | number[]
  maxSteps: number
  initialStepSize: number
  solve(
    rightHandSide: (x: number, y: number[]) => number[],
    start: number,
    values: number[],
    end: number,
  ): { y: number[]; outcome: number }
}

export const odex = load('odex') as {
  Solver: new (size: number) => OdexSolver
  Outcome: { Converged: number }
}

export interface Psychrolib {
  SI: number
  IP: number
  SetUnitSystem(system: number): void
  GetStandardAtmPressure(altitude: number): number
  GetStandardAtmTemperature(altitude: number): number
  GetDryAirDensity(dryBulbC: number, pressurePa: number): number
  GetMoistAirDensity(dryBulbC: number, humidityRatio: number, pressurePa: number): number
  GetHumRatioFromRelHum(dryBulbC: number, relativeHumidity: number, pressurePa: number): number
}

export const psychrolib = load('psychrolib') as Psychrolib

/** mathjs' integrator, which its type declarations leave out. */
export const { solveODE } = load('mathjs') as {
  solveODE(
    rightHandSide: (time: number, values: number[]) => number[],
    span: [number, number],
    start: number[],
    options: { method: 'RK23' | 'RK45'; tol: number; maxIter: number },
  ): { t: number[]; y: number[][] }
}
