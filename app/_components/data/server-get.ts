import { headers } from 'next/headers'
import { apiPath, readAnswer, type ApiAnswer, type ApiQuery } from './api'

/** Reads the API on the server with the visitor's own cookie; null where it cannot, and the browser then asks itself. */
export async function serverGet<T>(path: string, query?: ApiQuery): Promise<ApiAnswer<T> | null> {
  try {
    const incoming = await headers()
    const cookie = incoming.get('cookie')
    const response = await fetch(`http://127.0.0.1:${process.env.API_PORT ?? process.env.PORT ?? '3000'}${apiPath(path, query)}`, {
      headers: { accept: 'application/json', ...(cookie ? { cookie } : {}) }, cache: 'no-store',
    })
    return await readAnswer<ApiAnswer<T>>(response)
  } catch {
    return null
  }
}
