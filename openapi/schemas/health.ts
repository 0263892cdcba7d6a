import { z } from 'zod'

export const Live = z.strictObject({ status: z.literal('ok') }).meta({ id: 'Live' })

export const Ready = z
  .strictObject({
    status: z.literal('ok'),
    checks: z.strictObject({ database: z.literal('ok'), edition: z.int().meta({ description: 'Newest edition.' }) }),
  })
  .meta({ id: 'Ready' })

export const OpenApiDocument = z.looseObject({ openapi: z.string(), info: z.looseObject({ title: z.string(), version: z.string() }) }).meta({ id: 'OpenApiDocument' })
