import type { H3Event } from 'h3'
import { getRequestHeader, setResponseHeader } from 'h3'
import { AppError } from '#shared/errors'

/** How long what comes past the limit is let go by: a caller that is cut off while sending never reads the answer. */
const LINGER_MS = 1000

/** Reads a body while counting its bytes; nothing past the limit is kept. */
export async function readBodyBytes(event: H3Event, limitBytes: number): Promise<Buffer> {
  const request = event.node.req
  const tooLarge = (): AppError => {
    setResponseHeader(event, 'connection', 'close')
    return new AppError('body_too_large', {
      message: `The request is larger than the ${limitBytes / 1_000_000} MB this call takes.`,
    })
  }
  let over = Number(getRequestHeader(event, 'content-length') ?? 0) > limitBytes
  let linger: NodeJS.Timeout | undefined
  try {
    return await new Promise<Buffer>((resolve, reject) => {
      const refuse = (): void => {
        over = true
        linger ??= setTimeout(() => reject(tooLarge()), LINGER_MS)
      }
      const chunks: Buffer[] = []
      let bytes = 0
      request.on('data', (chunk: Buffer) => {
        bytes += chunk.length
        if (over) return
        if (bytes > limitBytes) refuse()
        else chunks.push(chunk)
      })
      request.once('end', () => (over ? reject(tooLarge()) : resolve(Buffer.concat(chunks))))
      request.once('error', (cause) => reject(cutOff(cause)))
      request.once('close', () => reject(cutOff()))
      if (over) refuse()
    })
  } finally {
    clearTimeout(linger)
  }
}

function cutOff(cause?: Error): AppError {
  return new AppError('bad_json', { message: 'The request ended before it was whole. Send it again.', cause })
}

/** The JSON of a body; text that is not UTF-8 is refused rather than repaired. */
export function parseJson(bytes: Buffer): unknown {
  try {
    return JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(bytes))
  } catch (cause) {
    throw new AppError('bad_json', { cause })
  }
}
