import type { InjectionKey } from 'vue'
import { removeSheetBranch, setSheetValue } from '#shared/build-sheet/sheet'
import type { BuildSheet, Origin, SheetValue } from '#shared/schemas/sheet'
import type { Control } from '#shared/schemas/control'
import type { Duty, Load } from '#shared/schemas/heat-input'
import type { Limits } from '#shared/schemas/limits'

/** What the input sheet edits: plain values, replaced whole, so that every change is seen and can be saved. */
export interface EditedValues {
  sheet: BuildSheet
  control: Control
  limits: Limits
  load: Load
  duty: Duty
}

export interface Editor {
  values: Readonly<Ref<EditedValues>>
  /** The leaves of the build sheet by their path; a change of load or drive cycle leaves them alone. */
  leaves: Readonly<Ref<ReadonlyMap<string, SheetValue>>>
  readOnly: boolean
  set: (changes: Partial<EditedValues>) => void
  /** What is wrong at a path of the build or the drive cycle, in words. */
  issueAt: (path: string) => string | undefined
  /** Whether anything under one of these paths is wrong: a closed section says so. */
  hasIssueIn: (...prefixes: string[]) => boolean
}

const KEY: InjectionKey<Editor> = Symbol('editor')

export function provideEditor(editor: Editor): void {
  provide(KEY, editor)
}

/** The editor of the sheet a component stands on. */
export function useEditor(): Editor {
  const editor = inject(KEY)
  if (!editor) throw new Error('This component belongs on an input sheet.')
  return editor
}

/** Reading and writing one leaf of the build sheet. */
export function useSheetLeaf(path: () => string) {
  const editor = useEditor()
  const leaf = computed(() => editor.leaves.value.get(path()))

  function write(change: Partial<SheetValue> & Pick<SheetValue, 'value'>) {
    const before = leaf.value
    const next: SheetValue = { path: path(), origin: before?.origin ?? 'typical', ...before, ...change }
    editor.set({ sheet: setSheetValue(editor.values.value.sheet, next) })
  }

  return {
    leaf,
    issue: computed(() => editor.issueAt(path())),
    readOnly: editor.readOnly,
    setValue(value: SheetValue['value'], typed?: { typed: string; unit: string }) {
      const { typed: _typed, unit: _unit, ...kept } = leaf.value ?? { origin: 'typical' as const }
      write({ ...kept, value, ...typed })
    },
    setTyped(typed: { typed: string; unit: string }) {
      if (leaf.value && leaf.value.typed !== typed.typed) write({ ...leaf.value, ...typed })
    },
    /** Who says so. A doubt that was noted by hand belongs to the old origin and goes with it. */
    setOrigin(origin: Origin) {
      if (!leaf.value) return
      const { relativeSpread: _doubt, ...kept } = leaf.value
      editor.set({ sheet: setSheetValue(editor.values.value.sheet, { ...kept, origin }) })
    },
    clear() {
      editor.set({ sheet: removeSheetBranch(editor.values.value.sheet, path()) })
    },
  }
}
