import type { H3Event } from 'h3'
import { getRequestHeader, setResponseHeader } from 'h3'
import { AppError } from '#shared/errors'

/** Reads a body while counting its bytes, and stops at the limit instead of holding it all first. */
export async function readBodyBytes(event: H3Event, limitBytes: number): Promise<Buffer> {
  const tooLarge = (): AppError => {
    setResponseHeader(event, 'connection', 'close')
    return new AppError('body_too_large', {
      message: `The request is larger than the ${limitBytes / 1_000_000} MB this call takes.`,
    })
  }
  if (Number(getRequestHeader(event, 'content-length') ?? 0) > limitBytes) throw tooLarge()
  const chunks: Buffer[] = []
  let bytes = 0
  for await (const chunk of event.node.req as AsyncIterable<Buffer>) {
    bytes += chunk.length
    if (bytes > limitBytes) throw tooLarge()
    chunks.push(chunk)
  }
  return Buffer.concat(chunks)
}

/** The JSON of a body; text that is not UTF-8 is refused rather than repaired. */
export function parseJson(bytes: Buffer): unknown {
  try {
    return JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(bytes))
  } catch (cause) {
    throw new AppError('bad_json', { cause })
  }
}
