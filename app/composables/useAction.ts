/**
 * A deed (see `useDeed`) bound to what a form sends: the same input tried again after a lost connection is the same deed,
 * another input is another. `fields` holds what the server said about single fields.
 */
export function useAction<Input, Answer>(perform: (input: Input, headers: { 'Idempotency-Key': string }) => Promise<Answer>) {
  const deed = useDeed()
  const fields = computed(() => deed.problem.value?.fields ?? {})

  /** The answer, or undefined when it failed (see `problem`) or is already under way. */
  function run(input: Input): Promise<Answer | undefined> {
    return deed.run(headers => perform(input, headers), JSON.stringify(input))
  }

  return { run, fields, isPending: deed.isPending, problem: deed.problem }
}
