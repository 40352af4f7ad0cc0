/**
 * What a phone remembers of the door's code that it opened: the form begun there, so that scanning again goes on
 * with it, and the door, so that the next person of a family can begin another. A shared tablet remembers nothing.
 */
const formKey = (door: string) => `notchwise.form.${door.slice(0, 12)}`
const doorKey = 'notchwise.door'

function tried<Answer>(what: () => Answer): Answer | null {
  try {
    return what()
  } catch {
    return null
  }
}

export const begunAt = (door: string) => tried(() => localStorage.getItem(formKey(door)))

export function rememberBegun(door: string, link: string) {
  tried(() => {
    localStorage.setItem(formKey(door), link)
    localStorage.setItem(doorKey, door)
  })
}

/** The door that this phone came from, to begin a form for somebody else. */
export const lastDoor = () => tried(() => localStorage.getItem(doorKey))

export function forgetBegun() {
  const door = lastDoor()
  if (door) tried(() => localStorage.removeItem(formKey(door)))
}
