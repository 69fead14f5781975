import { v7 as uuidv7 } from 'uuid'
import type { BuildAnswer } from '#shared/schemas/build'
import type { CatalogueCooler, CatalogueCoolerList } from '#shared/schemas/catalogue-cooler'
import type { AirPosition, Duty, Load } from '#shared/schemas/heat-input'
import type { ScenarioAnswer } from '#shared/schemas/scenario'
import type { Setup } from '#shared/schemas/setup'
import { isAllowed } from '#shared/permissions'
import type { Depth } from '#shared/workbench/depth'
import { MOST_OTHERS, type WorkbenchRequest } from '#shared/workbench/request'
import { useApi } from '~/composables/use-api'
import { useSessionStore } from '~/stores/session'
import { ApiError } from '~/utils/api-error'
import { useAutosave, type SaveState } from './use-autosave'
import { provideEditor, type EditedValues } from './use-editor'
import { useKeptTyping } from './use-kept-typing'
import { useWorkbenchAnswer } from './use-workbench-answer'

type BuildPart = Pick<EditedValues, 'sheet' | 'control' | 'limits'>
interface ScenarioPart {
  load: Load
  duty: Duty
}

/** The worse news first: what a person has to know about their typing. */
const WORSE: readonly SaveState[] = ['stale', 'refused', 'offline', 'saving', 'waiting', 'saved']
/** A stored result is what a list, a quote and tomorrow show: worth a request, but not one per keystroke. */
const STORE_AFTER_MS = 2500

/** A saved build on the workbench: its values, its answer, and what becomes of every change. */
export function useWorkbench(opened: {
  answer: BuildAnswer
  scenarioId: string
  depth: Partial<Depth> | null
}) {
  const api = useApi()
  const session = useSessionStore()
  const { build, setups, scenarios } = opened.answer
  const scenario = scenarios.find(({ id }) => id === opened.scenarioId)
  if (!scenario) throw createError({ status: 404, statusText: 'There is no such scenario.', fatal: true })

  const buildPath = `/api/builds/${build.id}`
  const scenarioPath = `${buildPath}/scenarios/${scenario.id}`
  const readOnly = session.me === null || !isAllowed(session.me.role, 'build.update')

  const buildPart = useAutosave<BuildPart>({
    initial: { sheet: build.sheet, control: build.control, limits: build.limits },
    version: build.version,
    push: async (changes, version) =>
      (await api<BuildAnswer>(buildPath, { method: 'PATCH', body: changes, version })).build.version,
    pull: async () => {
      const { sheet, control, limits, version } = (await api<BuildAnswer>(buildPath)).build
      return { value: { sheet, control, limits }, version }
    },
  })
  const scenarioPart = useAutosave<ScenarioPart>({
    initial: { load: scenario.load, duty: scenario.duty },
    version: scenario.version,
    push: async (changes, version) =>
      (await api<ScenarioAnswer>(scenarioPath, { method: 'PATCH', body: changes, version })).scenario.version,
    pull: async () => {
      const { load, duty, version } = (await api<ScenarioAnswer>(scenarioPath)).scenario
      return { value: { load, duty }, version }
    },
  })
  const values = computed<EditedValues>(() => ({ ...buildPart.value.value, ...scenarioPart.value.value }))

  const setupId = ref(setups[0]?.id ?? '')
  const request = computed<WorkbenchRequest>(() => {
    const chosen = setups.find(({ id }) => id === setupId.value) ?? setups[0]
    return {
      sheet: values.value.sheet,
      control: values.value.control,
      limits: values.value.limits,
      scenario: { load: values.value.load, duty: values.value.duty },
      setup: plainSetup(chosen),
      others: setups
        .filter(({ id }) => id !== chosen?.id)
        .slice(0, MOST_OTHERS)
        .map(plainSetup),
    }
  })

  const coolers = shallowRef<CatalogueCooler[] | null>(null)
  const mountAt = ref<AirPosition>('ahead-of-condenser')
  const shown = useWorkbenchAnswer(request, {
    initialDepth: opened.depth,
    extras: () => ({ coolers: coolers.value, mountAt: mountAt.value }),
  })
  watch(mountAt, () => shown.deepen())
  onMounted(async () => {
    try {
      coolers.value = (await api<CatalogueCoolerList>('/api/coolers')).coolers
    } catch (error) {
      // Without the catalogue everything else still stands; the list of parts says that it is not there.
      if (!(error instanceof ApiError)) throw error
      coolers.value = []
    }
    // The server sent what is quick; the rest is worked out here, the parts with it.
    shown.deepen()
  })

  const sheet = computed(() => buildPart.value.value.sheet)
  provideEditor({
    values,
    leaves: computed(() => new Map(sheet.value.values.map((value) => [value.path, value]))),
    readOnly,
    set(changes) {
      const { load, duty, ...ofBuild } = changes
      if (Object.keys(ofBuild).length > 0) buildPart.change(ofBuild)
      if (load !== undefined || duty !== undefined)
        scenarioPart.change({ ...(load ? { load } : {}), ...(duty ? { duty } : {}) })
    },
    issueAt: (path) => shown.refusal.value?.issues.find((issue) => issue.path === path)?.message,
    hasIssueIn: (...prefixes) =>
      shown.refusal.value?.issues.some(({ path }) => prefixes.some((prefix) => path.startsWith(prefix))) ??
      false,
  })

  const parts = [buildPart, scenarioPart] as const
  const state = computed(() => WORSE.find((one) => parts.some((part) => part.state.value === one)) ?? 'saved')
  const problem = computed(() => parts.map((part) => part.problem.value).find((text) => text !== undefined))

  async function flush() {
    await Promise.all(parts.map((part) => part.flush()))
  }
  const forStale = (act: (part: (typeof parts)[number]) => Promise<void>) =>
    Promise.all(parts.filter((part) => part.state.value === 'stale').map(act)).catch((error: unknown) => {
      if (!(error instanceof ApiError)) throw error
    })

  const storing = useStoredResult({
    enabled: !readOnly,
    store: (idOfResult) =>
      api(`${scenarioPath}/results`, {
        method: 'POST',
        body: { id: idOfResult, setupId: setupId.value },
        idempotencyKey: idOfResult,
      }),
  })
  watch([shown.settledCount, state], () => {
    if (shown.settledCount.value > 0 && state.value === 'saved' && !shown.refusal.value) storing.later()
  })

  useKeptTyping({
    key: `longpull:typing:${session.me?.user.id ?? ''}:${build.id}:${scenario.id}`,
    read: () => ({
      build: { changes: buildPart.changes(), version: buildPart.version.value },
      scenario: { changes: scenarioPart.changes(), version: scenarioPart.version.value },
    }),
    isOpen: () => state.value !== 'saved',
    restore: (kept) => {
      if (Object.keys(kept.build.changes).length > 0)
        buildPart.restore(kept.build.changes, kept.build.version)
      if (Object.keys(kept.scenario.changes).length > 0)
        scenarioPart.restore(kept.scenario.changes, kept.scenario.version)
      void shown.startHere()
    },
    when: () => [values.value, state.value],
  })

  /** Leaving saves what is open and stores the result that goes with it; the page does not wait long for either. */
  onBeforeRouteLeave(async () => {
    if (readOnly) return
    await Promise.race([
      flush().then(() => storing.now()),
      new Promise((resolve) => setTimeout(resolve, 3000)),
    ])
  })

  return {
    build,
    scenario,
    setups,
    setupId,
    values,
    readOnly,
    coolers,
    mountAt,
    ...shown,
    save: {
      state,
      problem,
      retry: flush,
      keepMine: () => forStale((part) => part.keepMine()),
      takeTheirs: () => forStale((part) => part.takeTheirs()),
    },
  }
}

function plainSetup(setup: Setup | undefined) {
  return { id: setup?.id ?? 'as-it-is', name: setup?.name ?? 'As it is', change: setup?.change ?? {} }
}

/** Stores the server's own result a while after the last change, and at once when the page is left. */
function useStoredResult({ enabled, store }: { enabled: boolean; store: (id: string) => Promise<unknown> }) {
  let timer: ReturnType<typeof setTimeout> | undefined
  async function now() {
    if (timer === undefined) return
    clearTimeout(timer)
    timer = undefined
    try {
      await store(uuidv7())
    } catch (error) {
      // The list shows an older answer until the next change is stored; nothing typed depends on it.
      if (!(error instanceof ApiError)) throw error
    }
  }
  function later() {
    if (!enabled) return
    clearTimeout(timer)
    timer = setTimeout(() => void now(), STORE_AFTER_MS)
  }
  onScopeDispose(() => clearTimeout(timer))
  return { later, now }
}
