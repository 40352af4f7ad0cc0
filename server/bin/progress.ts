/** Says a step's name when it takes over a second, and how long it took. */
export async function step<T>(name: string, work: () => Promise<T> | T): Promise<T> {
  const started = Date.now()
  let said = false
  const late = setTimeout(() => {
    said = true
    console.log(`${name} ...`)
  }, 1000)
  try {
    return await work()
  } finally {
    clearTimeout(late)
    if (said) console.log(`${name}: ${((Date.now() - started) / 1000).toFixed(1)} s`)
  }
}
