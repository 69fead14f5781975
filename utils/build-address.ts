/** Where a build opens: at the workbench of its first scenario, or at the build itself where it has none. */
export function buildAddress(build: { id: string; scenarioId: string | null }): string {
  return build.scenarioId === null
    ? `/builds/${build.id}`
    : `/builds/${build.id}/scenarios/${build.scenarioId}`
}
