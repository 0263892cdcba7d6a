/** A multipart body of a file and the fields beside it. */
export function formOf(file: string | Buffer, fields: Record<string, string> = {}, name = 'levels.csv'): { raw: Buffer; headers: Record<string, string> } {
  const boundary = `lodeterm-${Math.random().toString(36).slice(2)}`
  const parts = Object.entries(fields).map(([key, value]) => Buffer.from(`--${boundary}\r\nContent-Disposition: form-data; name="${key}"\r\n\r\n${value}\r\n`))
  const head = Buffer.from(`--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="${name}"\r\nContent-Type: text/csv\r\n\r\n`)
  return { raw: Buffer.concat([...parts, head, Buffer.from(file), Buffer.from(`\r\n--${boundary}--\r\n`)]), headers: { 'content-type': `multipart/form-data; boundary=${boundary}` } }
}
