/** A record with one entry for each name of a list. @throws never: every name is given a value. */
export function recordOf<Name extends string, T>(names: readonly Name[], of: (name: Name) => T): Record<Name, T> {
  const made: Partial<Record<Name, T>> = {}
  for (const name of names) made[name] = of(name)
  if (!isComplete(names, made)) throw new Error('A name was left out.')
  return made
}

function isComplete<Name extends string, T>(names: readonly Name[], made: Partial<Record<Name, T>>): made is Record<Name, T> {
  return names.every(name => name in made)
}
