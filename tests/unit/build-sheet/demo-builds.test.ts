import { describe, expect, it } from 'vitest'
import { createDemoBuilds } from '../../../shared/build-sheet/demo-builds'
import { judgeAnswer } from '../../../shared/build-sheet/limits'
import { deriveInputs } from '../../../shared/build-sheet/setups'
import { estimate } from '../../../shared/heat'
import { STAGES } from '../../../shared/schemas/build'
import { ControlSchema } from '../../../shared/schemas/control'
import { CustomerCreateSchema } from '../../../shared/schemas/customer'
import { HeatInputSchema } from '../../../shared/schemas/heat-input'
import { LimitsSchema } from '../../../shared/schemas/limits'
import { ScenarioCreateSchema } from '../../../shared/schemas/scenario'
import { SetupCreateSchema } from '../../../shared/schemas/setup'
import { BuildSheetSchema } from '../../../shared/schemas/sheet'

const ID = '01890a5d-ac96-774b-bcce-b302099a8057'
const one = createDemoBuilds('one')
const two = createDemoBuilds('two')

describe('the demo trucks', () => {
  it('are six at six different stages, and two of the other shop', () => {
    expect(one.map(({ stage }) => stage).sort()).toEqual([...STAGES].sort())
    expect(two).toHaveLength(2)
    const names = [...one, ...two].map(({ name }) => name)
    expect(new Set(names).size).toBe(8)
    expect(new Set(one.map(({ sheet }) => sheet.archetype)).size).toBe(3)
    const customers = new Set(one.map(({ customer }) => customer.email))
    expect(two.every(({ customer }) => !customers.has(customer.email))).toBe(true)
  })

  it('know something measured in at least three', () => {
    const measured = one.filter(({ sheet }) => sheet.values.some(({ origin }) => origin === 'measured'))
    expect(measured.length).toBeGreaterThanOrEqual(3)
  })

  describe.each([...one, ...two].map((build) => [build.name, build] as const))('%s', (_name, build) => {
    it('is one the program stores', () => {
      expect(BuildSheetSchema.safeParse(build.sheet).error?.issues).toBeUndefined()
      expect(ControlSchema.safeParse(build.control).success).toBe(true)
      expect(LimitsSchema.safeParse(build.limits).success).toBe(true)
      expect(CustomerCreateSchema.safeParse({ id: ID, ...build.customer }).error?.issues).toBeUndefined()
      expect(build.customer.email).toMatch(/[.@]example\.test$/)
      expect(build.scenarios.length).toBeGreaterThan(0)
      for (const scenario of build.scenarios)
        expect(ScenarioCreateSchema.safeParse({ id: ID, ...scenario }).error?.issues).toBeUndefined()
      for (const { name, change } of build.setups)
        expect(SetupCreateSchema.safeParse({ id: ID, name, change }).error?.issues).toBeUndefined()
      expect(build.setups.slice(0, 2).map(({ kind }) => kind)).toEqual(['as-it-is', 'drive-differently'])
    })

    it('has an answer for every scenario and set-up', () => {
      for (const scenario of build.scenarios)
        for (const setup of build.setups) {
          const inputs = deriveInputs({ sheet: build.sheet, control: build.control, scenario, setup })
          for (const input of [inputs.locked, inputs.unlocked]) {
            if (input === null) continue
            expect(HeatInputSchema.safeParse(input).error?.issues).toBeUndefined()
            const answer = estimate(input)
            expect(Number.isFinite(answer.peakSumpC)).toBe(true)
            expect(answer.peakSumpC).toBeGreaterThan(scenario.duty.ambientC)
            expect(answer.peakSumpC).toBeLessThan(220)
          }
        }
    })
  })

  it('show more than one rung of the ladder', () => {
    const judgements = [...one, ...two].map(({ sheet, control, scenarios, limits }) => {
      const { judged } = deriveInputs({ sheet, control, scenario: scenarios[0]! })
      return judgeAnswer(estimate(judged), limits).judgement
    })
    expect(new Set(judgements).size).toBeGreaterThanOrEqual(3)
  })
})
