import { toTenth } from './axis'

/** A label that wants to stand at `y` (its middle) and needs `height` pixels. */
export interface WantedLabel {
  id: string
  y: number
  height: number
}

/**
 * Moves labels of one column apart so that none covers another, as near as possible to where each wants to be.
 * Order is kept. When the room is too small for all, they are spread evenly and may touch.
 * @returns the middle of each label [px], by id
 */
export function spreadLabels(
  wanted: readonly WantedLabel[],
  top: number,
  bottom: number,
): Map<string, number> {
  const sorted = [...wanted].sort((a, b) => a.y - b.y)
  const placed = new Map<string, number>()
  const needed = sorted.reduce((sum, label) => sum + label.height, 0)
  if (needed > bottom - top) {
    let edge = top
    const factor = (bottom - top) / needed
    for (const label of sorted) {
      placed.set(label.id, toTenth(edge + (label.height * factor) / 2))
      edge += label.height * factor
    }
    return placed
  }
  // Groups of touching labels move as one to the mean of what their members want.
  const groups: { labels: WantedLabel[]; height: number; start: number }[] = []
  for (const label of sorted) {
    groups.push({ labels: [label], height: label.height, start: clampStart([label], top, bottom) })
    for (let last = groups.length - 1; last > 0; last -= 1) {
      const group = groups[last]
      const before = groups[last - 1]
      if (!group || !before || before.start + before.height <= group.start) break
      const labels = [...before.labels, ...group.labels]
      groups.splice(last - 1, 2, {
        labels,
        height: before.height + group.height,
        start: clampStart(labels, top, bottom),
      })
    }
  }
  for (const group of groups) {
    let edge = group.start
    for (const label of group.labels) {
      placed.set(label.id, toTenth(edge + label.height / 2))
      edge += label.height
    }
  }
  return placed
}

function clampStart(labels: readonly WantedLabel[], top: number, bottom: number): number {
  let offset = 0
  let sum = 0
  for (const label of labels) {
    sum += label.y - label.height / 2 - offset
    offset += label.height
  }
  return Math.min(Math.max(sum / labels.length, top), bottom - offset)
}

/** Cuts a name to about `most` characters at the end, with an ellipsis. */
export function shortenName(name: string, most: number): string {
  return name.length <= most ? name : `${name.slice(0, Math.max(1, most - 1)).trimEnd()}…`
}
