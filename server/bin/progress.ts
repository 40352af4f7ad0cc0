/** Says a step's name when it takes over a second, and how long it took in all. */
export async function step<T>(name: string, work: () => Promise<T> | T): Promise<T> {
  const started = Date.now()
  let said = false
  const late = setTimeout(() => {
    said = true
    console.log(`${name} ...`)
  }, 1000)
  try {
    const result = await work()
    if (said) console.log(`${name}: ${((Date.now() - started) / 1000).toFixed(1)} s`)
    return result
  } finally {
    clearTimeout(late)
  }
}
