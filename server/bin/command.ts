/** Runs a command to its end: what goes wrong is said in its own sentence, without a stack, and ends with code 1. */
export async function command(work: () => Promise<void>) {
  try {
    await work()
    process.exit(0)
  } catch (error) {
    console.error(error instanceof Error ? error.message : error)
    process.exit(1)
  }
}
