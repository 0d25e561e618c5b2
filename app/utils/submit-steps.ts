/** The way from question to promise, in order. */
export const STEPS = [
  { key: 'question', name: 'your question', heading: 'What do you want to know?' },
  { key: 'film', name: 'your film', heading: 'Show your coach two angles' },
  { key: 'coach', name: 'your coach', heading: 'Who shall answer?' },
  { key: 'send', name: 'promise and sending', heading: 'When your answer comes' },
] as const
export type SubmitStep = typeof STEPS[number]['key']

/** The step an address names; the first for anything else. */
export function readStep(value: unknown): SubmitStep {
  return STEPS.find(step => step.key === value)?.key ?? 'question'
}

/** The step before or after; undefined at the ends. */
export function neighbourStep(step: SubmitStep, by: 1 | -1): SubmitStep | undefined {
  const index = STEPS.findIndex(one => one.key === step) + by
  return index < 0 ? undefined : STEPS[index]?.key
}
