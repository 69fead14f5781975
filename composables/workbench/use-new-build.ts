import { v7 as uuidv7 } from 'uuid'
import { createDefaultFacts, createSheetFromFacts, EightFactsSchema } from '#shared/build-sheet/facts'
import type { BuildDraft, EightFacts, TypedTexts } from '#shared/build-sheet/facts'
import { listIssues } from '#shared/build-sheet/sheet'
import { AppError, type ErrorIssue } from '#shared/errors'
import type { BuildAnswer, BuildCreate } from '#shared/schemas/build'
import type { CatalogueCooler, CatalogueCoolerList } from '#shared/schemas/catalogue-cooler'
import type { WorkbenchRequest } from '#shared/workbench/request'
import { roundFacts } from '#shared/workbench/round-facts'
import type { UnitSystem } from '#shared/units/display'
import { useApi } from '~/composables/use-api'
import { useUnits } from '~/composables/use-units'
import { ApiError } from '~/utils/api-error'
import { useWorkbenchAnswer } from './use-workbench-answer'

/** What stands on the card; kept in the tab until it is saved or started over. */
interface CardDraft {
  facts: EightFacts
  /** Facts the caller has said; only these survive a change of the kind of truck. */
  said: (keyof EightFacts)[]
  typed: TypedTexts
  name: string
  customerName: string
  customerPhone: string
  /** Made once, so that saving twice by mistake makes one build. */
  ids: { build: string; scenario: string; customer: string }
}

const KEY = 'longpull:new-build'
const FIRST_ARCHETYPE = 'classic-4x4'

function createCard(system: UnitSystem): CardDraft {
  return {
    facts: roundFacts(createDefaultFacts(FIRST_ARCHETYPE), system),
    said: [],
    typed: {},
    name: '',
    customerName: '',
    customerPhone: '',
    ids: { build: '', scenario: '', customer: '' },
  }
}

const newIds = () => ({ build: uuidv7(), scenario: uuidv7(), customer: uuidv7() })

/** The card of a first call: eight facts, an answer from the first moment, nothing saved until it is asked for. */
export function useNewBuild() {
  const api = useApi()
  const { system } = useUnits()
  const card = shallowRef<CardDraft>(createCard(system.value))
  const facts = computed(() => card.value.facts)
  const coolers = shallowRef<CatalogueCooler[] | null>(null)

  const checked = computed(() => EightFactsSchema.safeParse(facts.value))
  const issues = computed<ErrorIssue[]>(() => (checked.value.success ? [] : listIssues(checked.value.error)))
  const issueAt = (path: string) => issues.value.find((issue) => issue.path === path)?.message

  /** The last facts that make a truck: the answer stays where it was while a field is being mended. */
  const draft = shallowRef<BuildDraft>(createSheetFromFacts(card.value.facts))
  const namesParts = () => facts.value.coolers.extras.some(({ kind }) => kind === 'catalogue')
  watch([facts, () => card.value.typed, () => (namesParts() ? coolers.value : null)], () => {
    if (!checked.value.success) return
    try {
      draft.value = createSheetFromFacts(checked.value.data, {
        catalogue: coolers.value ?? [],
        typed: card.value.typed,
      })
    } catch (error) {
      if (!(error instanceof AppError)) throw error
    }
  })
  const request = computed<WorkbenchRequest>(() => {
    const { sheet, control, limits, scenario, setups } = draft.value
    const [asItIs, ...others] = setups.map((setup) => ({
      id: setup.kind,
      name: setup.name,
      change: setup.change,
    }))
    return {
      sheet,
      control,
      limits,
      scenario,
      setup: asItIs ?? { id: 'as-it-is', name: 'As it is', change: {} },
      others,
    }
  })
  const shown = useWorkbenchAnswer(request, { extras: () => ({ coolers: null }) })

  function change(next: Partial<CardDraft>) {
    card.value = { ...card.value, ...next }
    keep()
  }
  function say(next: Partial<EightFacts>, typed?: TypedTexts) {
    const said = new Set([...card.value.said, ...(Object.keys(next) as (keyof EightFacts)[])])
    change({
      facts: { ...facts.value, ...next },
      said: [...said],
      typed: { ...card.value.typed, ...typed },
    })
  }
  /** Another kind of truck keeps what the caller has said and takes the rest from the new kind. */
  function setArchetype(archetype: EightFacts['archetype']) {
    const said = Object.fromEntries(
      card.value.said
        .filter((key) => key !== 'archetype' && key !== 'coolers')
        .map((key) => [key, facts.value[key]]),
    )
    change({
      facts: { ...roundFacts(createDefaultFacts(archetype), system.value), ...said, archetype },
      said: card.value.said.filter((key) => key !== 'coolers'),
    })
  }

  function keep() {
    try {
      sessionStorage.setItem(KEY, JSON.stringify(card.value))
    } catch {
      // Without storage the card still holds until the tab is closed.
    }
  }
  function startOver() {
    card.value = { ...createCard(system.value), ids: newIds() }
    problem.value = null
    keep()
    void shown.startHere()
  }
  onMounted(async () => {
    card.value = readCard() ?? { ...card.value, ids: newIds() }
    void shown.startHere()
    shown.deepen()
    try {
      coolers.value = (await api<CatalogueCoolerList>('/api/coolers')).coolers
    } catch (error) {
      // Without the catalogue a cooler can still be told by its kind and size.
      if (!(error instanceof ApiError)) throw error
    }
  })

  const saving = ref(false)
  const problem = shallowRef<ApiError | null>(null)

  /** Saves the card as a build. @returns where it opens; undefined when it could not be saved, then the card stays */
  async function save(): Promise<string | undefined> {
    saving.value = true
    problem.value = null
    try {
      const { build, setups } = await api<BuildAnswer>('/api/builds', {
        method: 'POST',
        body: createRequest(),
        idempotencyKey: card.value.ids.build,
      })
      const { scenario } = card.value.ids
      sessionStorage.removeItem(KEY)
      await storeFirst(`/api/builds/${build.id}/scenarios/${scenario}/results`, setups[0]?.id)
      return `/builds/${build.id}/scenarios/${scenario}`
    } catch (error) {
      if (!(error instanceof ApiError)) throw error
      problem.value = error
      return undefined
    } finally {
      saving.value = false
    }
  }
  /** The list of builds shows stored results; the workbench stores another after the next change if this one is lost. */
  async function storeFirst(path: string, setupId: string | undefined) {
    if (setupId === undefined) return
    try {
      await api(path, { method: 'POST', body: { id: uuidv7(), setupId } })
    } catch (error) {
      if (!(error instanceof ApiError)) throw error
    }
  }
  function createRequest(): BuildCreate {
    const { ids, name, customerName, customerPhone } = card.value
    const { sheet, control, limits, scenario } = draft.value
    const phone = customerPhone.trim()
    return {
      id: ids.build,
      name: name.trim() === '' ? draft.value.name : name.trim(),
      ...(customerName.trim() === ''
        ? {}
        : { customer: { id: ids.customer, name: customerName.trim(), ...(phone === '' ? {} : { phone }) } }),
      sheet,
      control,
      limits,
      scenario: { id: ids.scenario, ...scenario },
    }
  }

  return {
    card,
    facts,
    coolers,
    draft,
    issues,
    issueAt,
    change,
    say,
    setArchetype,
    startOver,
    saving,
    problem,
    save,
    ...shown,
  }
}

function readCard(): CardDraft | undefined {
  try {
    const text = sessionStorage.getItem(KEY)
    return text === null ? undefined : (JSON.parse(text) as CardDraft)
  } catch {
    return undefined
  }
}
