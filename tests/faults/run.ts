/**
 * `npm run test:faults [name]`: the long fault tests, each with a control that must fail. Their short forms run with `npm test`.
 */
const FAULTS: Record<string, () => Promise<void>> = {}
