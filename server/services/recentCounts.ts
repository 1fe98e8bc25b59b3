interface Entry {
  count: number
  lastAt: number
}

/**
 * How often something happened lately to each of many keys. A count is forgotten when nothing has been added to it for
 * a while; of too many keys the ones that were quiet longest go first, so that nobody can fill the memory.
 */
export class RecentCounts {
  private readonly entries = new Map<string, Entry>()

  constructor(
    private readonly forgetAfterMs: number,
    private readonly mostKeys = 10_000,
  ) {}

  get size(): number {
    return this.entries.size
  }

  read(key: string, at: Date): number {
    const entry = this.entries.get(key)
    return entry && at.getTime() - entry.lastAt < this.forgetAfterMs ? entry.count : 0
  }

  add(key: string, at: Date): void {
    const count = this.read(key, at) + 1
    // Taken out and put in again, it stands last in the order in which keys are given up.
    this.entries.delete(key)
    this.entries.set(key, { count, lastAt: at.getTime() })
    for (const oldest of this.entries.keys()) {
      if (this.entries.size <= this.mostKeys) break
      this.entries.delete(oldest)
    }
  }

  clear(key: string): void {
    this.entries.delete(key)
  }
}
