import { AppError } from '#shared/errors'

/**
 * Lets a few pieces of heavy work run at a time and a few more wait; the rest are turned away at once, so that the
 * queue never grows into a stall.
 */
export class Gate {
  private running = 0
  private readonly waiting: (() => void)[] = []

  /**
   * @param mostRunning - pieces of work at the same time
   * @param mostWaiting - pieces that may wait for their turn
   * @param retryAfterS - what one that is turned away is told
   */
  constructor(
    private readonly mostRunning: number,
    private readonly mostWaiting: number,
    private readonly retryAfterS: number,
  ) {}

  /** @throws too_many_requests when too many wait already */
  async run<T>(work: () => Promise<T>): Promise<T> {
    await this.enter()
    try {
      return await work()
    } finally {
      this.leave()
    }
  }

  private async enter(): Promise<void> {
    if (this.running < this.mostRunning) {
      this.running += 1
      return
    }
    if (this.waiting.length >= this.mostWaiting)
      throw new AppError('too_many_requests', { retryAfterS: this.retryAfterS })
    // The place of the one that leaves is handed over, so that nobody slips in between.
    await new Promise<void>((resolve) => this.waiting.push(resolve))
  }

  private leave(): void {
    const next = this.waiting.shift()
    if (next === undefined) this.running -= 1
    else next()
  }
}
