import type { RoadConditions } from '../schemas/estimate'
import type { Duty, Segment, SteadySegment } from '../schemas/heat-input'

/** Speed the grades are tried at when nothing in the drive cycle is driven steadily: 45 mph. Judgement. */
const USUAL_SPEED_MPS = 20.1168

/** The climb that temperature versus grade is asked about. */
export interface Hill {
  /** Its place in the drive cycle; undefined when the cycle has no steady stretch. */
  index: number | undefined
  speedMps: number
  grade: number | undefined
  /** Length of the climb [m]; undefined when there is none, then only the endless climb makes sense. */
  distanceM: number | undefined
  road: RoadConditions
}

/**
 * The hill of a drive cycle: its steepest steady stretch, the longest of equals. Without a hill the longest steady stretch
 * lends its speed; without any, 45 mph is asked about.
 */
export function findHill(duty: Duty): Hill {
  const steady = duty.segments.flatMap((segment, index) =>
    segment.kind === 'steady' ? [{ segment, index }] : [],
  )
  const hills = steady.filter(({ segment }) => segment.grade > 0)
  const found =
    hills.length > 0 ? hills.reduce(steeper) : steady.reduce<Placed | undefined>(longer, undefined)
  if (found === undefined)
    return { index: undefined, speedMps: USUAL_SPEED_MPS, grade: undefined, distanceM: undefined, road: {} }
  const { segment, index } = found
  return {
    index,
    speedMps: segment.speedMps,
    grade: hills.length > 0 ? segment.grade : undefined,
    distanceM: hills.length > 0 ? lengthOf(segment) : undefined,
    road: roadOf(segment),
  }
}

interface Placed {
  segment: SteadySegment
  index: number
}

const lengthOf = (segment: SteadySegment): number =>
  segment.distanceM ?? segment.speedMps * (segment.durationS ?? 0)

function steeper(best: Placed, next: Placed): Placed {
  if (next.segment.grade !== best.segment.grade) return next.segment.grade > best.segment.grade ? next : best
  return lengthOf(next.segment) > lengthOf(best.segment) ? next : best
}

function longer(best: Placed | undefined, next: Placed): Placed {
  return best === undefined || lengthOf(next.segment) > lengthOf(best.segment) ? next : best
}

/** What the road and the levers are on a stretch, without its speed, grade and length. */
function roadOf({ surface, rollingResistance, headwindMps, range, topGear }: Segment): RoadConditions {
  return Object.fromEntries(
    Object.entries({ surface, rollingResistance, headwindMps, range, topGear }).filter(
      ([, value]) => value !== undefined,
    ),
  )
}
