import { AppError, type ErrorIssue } from '#shared/errors'

/** Why a change of a row at a version did nothing: the row is gone, or somebody was faster. */
export function explainMissedChange(present: { version: number } | undefined): AppError {
  if (present === undefined) return new AppError('not_found')
  return new AppError('stale_version', { facts: { currentVersion: present.version } })
}

/**
 * Runs a derivation and puts its issues where the caller typed them: the model's own paths lie within a field of the
 * request (`vehicle.massKg` within `sheet`, `duty.segments.0.topGear` within `scenario`).
 */
export function locatingIssues<T>(locate: (path: string) => string, derive: () => T): T {
  try {
    return derive()
  } catch (error) {
    if (!(error instanceof AppError) || error.details.issues === undefined) throw error
    const issues: ErrorIssue[] = error.details.issues.map(({ path, message }) => ({
      path: locate(path),
      message,
    }))
    throw new AppError(error.code, { ...error.details, issues })
  }
}
