import type { Duty, Segment, SteadySegment } from '../schemas/heat-input'
import { formatGrade } from '../charts/formats'

/** Changing a drive cycle stretch by stretch; a duty is never changed in place. */

/** A new drive cycle with one stretch replaced. */
export function replaceSegment(duty: Duty, index: number, segment: Segment): Duty {
  return { ...duty, segments: duty.segments.with(index, segment) }
}

/** A new drive cycle without one stretch; the last one stays, since a drive cycle needs one. */
export function removeSegment(duty: Duty, index: number): Duty {
  return duty.segments.length === 1 ? duty : { ...duty, segments: duty.segments.toSpliced(index, 1) }
}

/** A new drive cycle with a stretch put in behind another. */
export function addSegment(duty: Duty, after: number, kind: Segment['kind']): Duty {
  return { ...duty, segments: duty.segments.toSpliced(after + 1, 0, createSegment(kind)) }
}

/** A new drive cycle with one stretch moved to another place. */
export function moveSegment(duty: Duty, from: number, to: number): Duty {
  const segment = duty.segments[from]
  if (segment === undefined || to < 0 || to >= duty.segments.length) return duty
  return { ...duty, segments: duty.segments.toSpliced(from, 1).toSpliced(to, 0, segment) }
}

/** What a new stretch starts from: usual for its kind, common practice, no source. */
export function createSegment(kind: Segment['kind']): Segment {
  switch (kind) {
    case 'steady':
      return { kind, speedMps: 20.1168, grade: 0, durationS: 600 }
    case 'stopGo':
      return { kind, speedMps: 13.4112, stopsPerKm: 2, durationS: 600 }
    case 'stall':
      return { kind, throttle: 0.3, durationS: 5 }
    case 'idle':
      return { kind, durationS: 300 }
  }
}

/** A steady stretch given by its length instead of its time, or the other way, as long as it was. */
export function measureBy(segment: SteadySegment, by: 'durationS' | 'distanceM'): SteadySegment {
  const { durationS, distanceM, ...rest } = segment
  if (by === 'durationS') return { ...rest, durationS: durationS ?? (distanceM ?? 0) / segment.speedMps }
  return { ...rest, distanceM: distanceM ?? (durationS ?? 0) * segment.speedMps }
}

/** What a stretch is, in two words. */
export function segmentName(segment: Segment): string {
  const surface =
    segment.surface === undefined || segment.surface === 'pavement' ? '' : `, ${segment.surface}`
  switch (segment.kind) {
    case 'steady':
      if (segment.grade >= 0.005) return `Climb ${formatGrade(segment.grade)}${surface}`
      if (segment.grade <= -0.005) return `Down ${formatGrade(-segment.grade)}${surface}`
      return `Flat${surface}`
    case 'stopGo':
      return `Stop and go${surface}`
    case 'stall':
      return 'Against the brakes'
    case 'idle':
      return segment.inGear === true ? 'Idle in gear' : 'Idle'
  }
}
