import { makeTemplate } from './template'

/** Before the first test that needs a server. */
export default makeTemplate
