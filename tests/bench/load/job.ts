import { z } from 'zod'

export const requestSchema = z.object({
  method: z.enum(['GET', 'POST']),
  path: z.string(),
  headers: z.record(z.string(), z.string()),
  body: z.string().default(''),
})
export type LoadRequest = z.output<typeof requestSchema>

/** A bounded load on 127.0.0.1. */
export const jobSchema = z.object({
  port: z.number().int(),
  connections: z.number().int().min(1).max(64),
  requests: z.array(requestSchema).min(1),
  /** `once`: each request one time. `again`: round and round until `limitMs`. */
  order: z.enum(['once', 'again']),
  limitMs: z.number().min(1).max(60_000),
  /** The one status that counts; any other spoils the run. */
  expectedStatus: z.number().int(),
})
export type LoadJob = z.output<typeof jobSchema>

export const loadResultSchema = z.object({
  answered: z.number().int(),
  /** From the first byte sent to the last answer. */
  seconds: z.number(),
  p50Ms: z.number(),
  p99Ms: z.number(),
  /** How much of one core making the load took, 0 to 1: near 1, the load and not the server was measured. */
  generatorBusy: z.number(),
  /** The first answers of another status, as they came. */
  unexpected: z.array(z.string()),
})
export type LoadResult = z.output<typeof loadResultSchema>
