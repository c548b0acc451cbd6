// How often a second something pure can be done, in seconds of processor: other programs' work does not count.

/** Runs long enough for the kernel's count, however fast it is. */
const leastMs = 200

const spentMs = (since: NodeJS.CpuUsage): number => {
  const { user, system } = process.cpuUsage(since)
  return (user + system) / 1000
}

/** Items a second of `work`, which does `items` of them each time. */
export const perSecond = (items: number, work: () => unknown): number => {
  const began = process.cpuUsage()
  let times = 0
  let ms = 0
  while (ms < leastMs) {
    work()
    times += 1
    ms = spentMs(began)
  }
  return (items * times) / (ms / 1000)
}
