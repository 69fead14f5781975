import type { z } from 'zod'
import { BuildSchema } from '../schemas/heat-input'

/** Lowest and highest value the model takes at a path of the build, in SI, as its own schema says. */
export interface Bounds {
  min?: number
  max?: number
}

interface SchemaNode {
  shape?: Record<string, z.core.$ZodType>
  element?: z.core.$ZodType
  options?: readonly z.core.$ZodType[]
  unwrap?: () => z.core.$ZodType
  minValue?: number | null
  maxValue?: number | null
}

/** Finds the bounds of a number in the build by walking the schema; a path it does not know has none. */
export function findBounds(path: string): Bounds {
  let nodes: SchemaNode[] = [BuildSchema as SchemaNode]
  for (const part of path.split('.')) nodes = nodes.flatMap(open).flatMap((node) => step(node, part))
  const numbers = nodes.flatMap(open).filter((node) => typeof node.minValue === 'number')
  const [node] = numbers
  return node ? { min: node.minValue ?? undefined, max: node.maxValue ?? undefined } : {}
}

/** Takes the optional wrapping off, and spreads a choice of shapes into its options. */
function open(node: SchemaNode): SchemaNode[] {
  if (node.options) return node.options.map((option) => option as SchemaNode).flatMap(open)
  if (node.unwrap && !node.shape && !node.element) return open(node.unwrap() as SchemaNode)
  return [node]
}

function step(node: SchemaNode, part: string): SchemaNode[] {
  if (node.element && /^\d+$/.test(part)) return [node.element as SchemaNode]
  const child = node.shape?.[part]
  return child ? [child as SchemaNode] : []
}
