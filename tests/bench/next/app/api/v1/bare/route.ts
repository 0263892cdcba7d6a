import { connection } from 'next/server'

/** A route handler with nothing around it: what the framework alone costs. The answer is that of `constant`. */
export async function GET(): Promise<Response> {
  await connection()
  return Response.json({ data: { answer: 42 } })
}
