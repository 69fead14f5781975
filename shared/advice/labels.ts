import { CONSTRUCTION_WORDS, POSITION_WORDS } from '../build-sheet/generic-cooler'
import { findSheetValue } from '../build-sheet/sheet'
import type { BuildSheet } from '../schemas/sheet'
import type { Quantity } from '../units/display'

/**
 * Every value an answer depends on, called so that it can be read anywhere: the fields of the sheet have shorter names,
 * which only read inside their section.
 */

export interface PathLabel {
  label: string
  quantity: Quantity
}

const entry = (label: string, quantity: Quantity): PathLabel => ({ label, quantity })

/** By path of the sheet, of the load or of the drive cycle; `*` stands for any place in a list. */
const LABELS: Readonly<Record<string, PathLabel>> = {
  'vehicle.massKg': entry('Weight of the truck with people and gear', 'mass'),
  'vehicle.dragAreaM2': entry('Drag area of the truck', 'dragArea'),
  'vehicle.tyreRadiusM': entry('Rolling radius of the tires', 'length'),

  'engine.fuel': entry('Fuel', 'number'),
  'engine.induction': entry('How the engine breathes', 'number'),
  'engine.peakTorqueNm': entry('Peak torque of the engine', 'torque'),
  'engine.peakTorqueRpm': entry('Engine speed of peak torque', 'rotation'),
  'engine.peakPowerW': entry('Peak power of the engine', 'power'),
  'engine.peakPowerRpm': entry('Engine speed of peak power', 'rotation'),
  'engine.idleRpm': entry('Idle speed', 'rotation'),
  'engine.redlineRpm': entry('Redline', 'rotation'),
  'engine.curve.*.rpm': entry('Engine speed of a point of the torque curve', 'rotation'),
  'engine.curve.*.torqueNm': entry('Torque of a point of the torque curve', 'torque'),
  'engine.coolantHeatRatio': entry('Heat to the coolant per engine power', 'number'),

  'converter.stallRpm': entry('Stall speed of the converter', 'rotation'),
  'converter.stallTorqueNm': entry('Torque the converter takes at stall', 'torque'),
  'converter.stallTorqueRatio': entry('Torque ratio of the converter at stall', 'number'),
  'converter.couplingPoint': entry('Coupling point of the converter, speed ratio', 'number'),
  'converter.heatCapacityJK': entry('Heat the converter stores, J/K', 'number'),
  'converter.oilShare': entry('Share of the oil in the converter', 'share'),
  'converter.lockup.fitted': entry('Lock-up clutch fitted', 'number'),
  'converter.lockup.minGear': entry('Lowest gear that locks', 'number'),
  'converter.lockup.minSpeedMps': entry('Lowest speed that locks', 'speed'),
  'converter.lockup.maxTurbineTorqueNm': entry('Most torque the lock-up clutch holds', 'torque'),
  'converter.lockup.slipRpm': entry('Slip of the lock-up clutch', 'rotation'),

  'transmission.gears.*.ratio': entry('Ratio of gear {n}', 'number'),
  'transmission.gears.*.efficiency': entry('Efficiency of gear {n}', 'share'),
  'transmission.fluid.class': entry('Fluid', 'number'),
  'transmission.fluid.kv40MmSqS': entry('Viscosity of the fluid at 40 °C (104 °F), mm²/s', 'number'),
  'transmission.fluid.kv100MmSqS': entry('Viscosity of the fluid at 100 °C (212 °F), mm²/s', 'number'),
  'transmission.fluid.density15KgM3': entry('Density of the fluid at 15 °C (59 °F), kg/m³', 'number'),
  'transmission.fluidVolumeM3': entry('Fluid, all of it', 'volume'),
  'transmission.dryMassKg': entry('Weight of the transmission without fluid', 'mass'),
  'transmission.caseAreaM2': entry('Outside of case and pan', 'dragArea'),
  'transmission.shiftStyle': entry('How it shifts', 'number'),
  'transmission.ratedInputTorqueNm': entry('Torque the transmission is rated for', 'torque'),
  'transmission.pump.displacementM3PerRev': entry('What the pump moves in one turn', 'volume'),
  'transmission.pump.linePressureMinPa': entry('Line pressure without load', 'pressure'),
  'transmission.pump.linePressureMaxPa': entry('Line pressure under full load', 'pressure'),

  'transferCase.highRatio': entry('High range ratio', 'number'),
  'transferCase.lowRatio': entry('Low range ratio', 'number'),
  'transferCase.efficiencyHigh': entry('Efficiency of the transfer case in high range', 'share'),
  'transferCase.efficiencyLow': entry('Efficiency of the transfer case in low range', 'share'),
  'transferCase.surfaceM2': entry('Outside of the transfer case', 'dragArea'),
  'transferCase.heatCapacityJK': entry('Heat the transfer case stores, J/K', 'number'),
  'axle.ratio': entry('Axle ratio', 'number'),
  'axle.efficiency': entry('Efficiency of the axle', 'share'),
  'axle.surfaceM2': entry('Outside of the axle', 'dragArea'),
  'axle.heatCapacityJK': entry('Heat the axle stores, J/K', 'number'),

  'cooling.coolers.*.name': entry('{cooler}: name', 'number'),
  'cooling.coolers.*.construction': entry('{cooler}: construction', 'number'),
  'cooling.coolers.*.position': entry('{cooler}: place', 'number'),
  'cooling.coolers.*.faceAreaM2': entry('{cooler}: face', 'area'),
  'cooling.coolers.*.ramFraction': entry('{cooler}: share of road speed that reaches it', 'share'),
  'cooling.coolers.*.fanFlowM3S': entry('{cooler}: air its own fan moves', 'airFlow'),
  'cooling.coolers.*.blockedFraction': entry('{cooler}: blocked share of its face', 'share'),
  'cooling.coolers.*.parallelWithPrevious': entry('{cooler}: beside the one before (parallel)', 'number'),
  'cooling.coolers.*.airShare': entry('{cooler}: share of the resistance on the air side', 'share'),
  'cooling.coolers.*.rating.heatW': entry('{cooler}: heat it is rated for', 'heatRate'),
  'cooling.coolers.*.rating.inletDifferenceK': entry(
    '{cooler}: temperature difference of the rating',
    'temperatureRise',
  ),
  'cooling.coolers.*.rating.oilFlowM3S': entry('{cooler}: oil flow of the rating', 'volumeFlow'),
  'cooling.coolers.*.rating.airVelocityMps': entry('{cooler}: air speed of the rating', 'airSpeed'),
  'cooling.coolers.*.rating.coolantFlowM3S': entry('{cooler}: coolant flow of the rating', 'volumeFlow'),
  'cooling.coolers.*.rating.pressureDropPa': entry('{cooler}: pressure drop of the rating', 'pressure'),
  'cooling.coolers.*.rating.oilInC': entry('{cooler}: oil temperature of the rating', 'temperature'),

  'cooling.lines.innerDiameterM': entry('Bore of the cooler lines', 'length'),
  'cooling.lines.lengthM': entry('Length of the cooler lines, out and back', 'height'),
  'cooling.lines.fittingsK': entry('Fittings of the lines, velocity heads', 'number'),
  'cooling.lines.roughnessM': entry('Roughness of the lines', 'length'),
  'cooling.feed.pressureMaxPa': entry('Pressure that feeds the coolers', 'pressure'),
  'cooling.feed.saturationRpm': entry('Engine speed from which the feed is full', 'rotation'),
  'cooling.feed.openFlowM3S': entry('Oil flow with nothing in the way', 'volumeFlow'),
  'cooling.bypass.openC': entry('Thermal bypass begins to open', 'temperature'),
  'cooling.bypass.fullC': entry('Thermal bypass fully open', 'temperature'),
  'cooling.stack.ramFraction': entry('Share of road speed that gets through the front', 'share'),
  'cooling.stack.blockedFraction': entry('Share of the front that is blocked', 'share'),
  'cooling.stack.fan.drive': entry('What drives the fan', 'number'),
  'cooling.stack.fan.faceVelocityMps': entry('Air the fan moves', 'airSpeed'),
  'cooling.radiator.faceAreaM2': entry('Face of the radiator', 'area'),
  'cooling.radiator.rating.heatW': entry('Heat the radiator is rated for', 'heatRate'),
  'cooling.radiator.rating.inletDifferenceK': entry(
    'Temperature difference of the radiator’s rating',
    'temperatureRise',
  ),
  'cooling.radiator.rating.airVelocityMps': entry('Air speed of the radiator’s rating', 'airSpeed'),
  'cooling.radiator.rating.coolantFlowM3S': entry('Coolant flow of the radiator’s rating', 'volumeFlow'),
  'cooling.radiator.rating.pumpRpm': entry('Engine speed of the radiator’s rating', 'rotation'),
  'cooling.radiator.thermostat.openC': entry('Thermostat begins to open', 'temperature'),
  'cooling.radiator.thermostat.fullC': entry('Thermostat fully open', 'temperature'),
  'cooling.condenserW': entry('Heat of the condenser, air conditioning on', 'heatRate'),
  'cooling.underbodyRiseK': entry('Air under the body above outside', 'temperatureRise'),
  'cooling.coolantHeatCapacityJK': entry('Heat engine and coolant store, J/K', 'number'),

  'load.cargoMassKg': entry('Cargo', 'mass'),
  'load.trailerMassKg': entry('Weight of the trailer', 'mass'),
  'load.trailerDragAreaM2': entry('Drag area the trailer adds', 'dragArea'),
  'duty.ambientC': entry('Outside air', 'temperature'),
  'duty.altitudeM': entry('Altitude', 'height'),
  'duty.airConditioning': entry('Air conditioning', 'number'),
  'duty.start.sumpC': entry('Pan at the start', 'temperature'),
  'duty.start.coolantC': entry('Coolant at the start', 'temperature'),
  'duty.start.axleC': entry('Axle oil at the start', 'temperature'),
  'duty.segments.*.kind': entry('How it is driven', 'number'),
  'duty.segments.*.speedMps': entry('Speed', 'speed'),
  'duty.segments.*.grade': entry('Grade', 'grade'),
  'duty.segments.*.durationS': entry('How long it lasts', 'minutes'),
  'duty.segments.*.distanceM': entry('Length of the stretch', 'distance'),
  'duty.segments.*.stopsPerKm': entry('Stops per km', 'number'),
  'duty.segments.*.accelerationMps2': entry('Acceleration from a stop, m/s²', 'number'),
  'duty.segments.*.idleS': entry('Standing at each stop', 'seconds'),
  'duty.segments.*.inGear': entry('Standing in gear', 'number'),
  'duty.segments.*.throttle': entry('Throttle against the brakes', 'share'),
  'duty.segments.*.surface': entry('Surface', 'number'),
  'duty.segments.*.rollingResistance': entry('Rolling resistance', 'number'),
  'duty.segments.*.headwindMps': entry('Headwind', 'speed'),
  'duty.segments.*.range': entry('Range', 'number'),
  'duty.segments.*.topGear': entry('Highest gear allowed', 'number'),
}

/** Groups of the sheet that advice may be about as a whole. */
const GROUPS: Readonly<Record<string, string>> = {
  'cooling.radiator': 'Radiator',
  'cooling.radiator.rating': 'Rating of the radiator',
  'cooling.coolers.*': '{cooler}',
  'cooling.coolers.*.rating': '{cooler}: its rating',
}

/** Paths that have a label, lists with `*`. */
export const LABELED_PATHS: readonly string[] = Object.keys(LABELS)

const patternOf = (path: string): string => path.replace(/\.\d+(?=\.|$)/g, '.*')

/** Label and quantity of a leaf; undefined for a path that is none. */
export function findLabel(path: string, sheet?: BuildSheet): PathLabel | undefined {
  const found = LABELS[patternOf(path)]
  return found && { ...found, label: filled(found.label, path, sheet) }
}

/** What a value or a group of values is called; a path nobody knows is called by itself. */
export function labelOf(path: string, sheet?: BuildSheet): string {
  const label = LABELS[patternOf(path)]?.label ?? GROUPS[patternOf(path)]
  return label === undefined ? path : filled(label, path, sheet)
}

function filled(label: string, path: string, sheet?: BuildSheet): string {
  const index = /\.(\d+)(?=\.|$)/.exec(path)?.[1]
  if (index === undefined) return label
  const number = String(Number(index) + 1)
  const name = sheet && findSheetValue(sheet, `cooling.coolers.${index}.name`)?.value
  return label
    .replace('{n}', number)
    .replace('{cooler}', typeof name === 'string' && name !== '' ? name : `Cooler ${number}`)
}

/** Words for values that are words, by the last part of their path; the model’s own word where none is needed. */
const VALUE_WORDS: Readonly<Record<string, Readonly<Record<string, string>>>> = {
  fuel: { petrol: 'gasoline', diesel: 'diesel' },
  induction: { natural: 'naturally aspirated', forced: 'turbo or blower' },
  class: {
    'atf-standard': 'standard viscosity',
    'atf-low': 'low viscosity',
    'atf-ultra-low': 'ultra-low viscosity',
  },
  shiftStyle: { tow: 'to protect the fluid (tow)', economy: 'to keep the tall gear (economy)' },
  drive: { engine: 'the engine', electric: 'electricity' },
  construction: CONSTRUCTION_WORDS,
  position: POSITION_WORDS,
  kind: { steady: 'steadily', stopGo: 'stop and go', stall: 'against the brakes', idle: 'standing' },
}

/** A value that is no number, in words: "gasoline", "yes". */
export function valueWords(path: string, value: string | boolean): string {
  if (typeof value === 'boolean') return value ? 'yes' : 'no'
  return VALUE_WORDS[path.split('.').at(-1) ?? '']?.[value] ?? value
}
