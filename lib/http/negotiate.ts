import { type Format, MEDIA_TYPES } from '@/openapi/core/formats'
import { Problem } from '@/lib/problem'

interface Range { type: string; subtype: string; q: number; specific: number }

function readAccept(field: string): Range[] {
  return field.split(',').flatMap((item): Range[] => {
    const [range = '', ...parameters] = item.split(';').map((part) => part.trim())
    const [type, subtype] = range.toLowerCase().split('/')
    if (type === undefined || subtype === undefined) return []
    const weight = parameters.find((parameter) => /^q=/i.test(parameter))?.slice(2)
    const q = weight === undefined ? 1 : Number(weight)
    return [{ type, subtype, q: Number.isFinite(q) ? q : 0, specific: type === '*' ? 0 : subtype === '*' ? 1 : 2 }]
  })
}

const covers = (range: Range, type: string, subtype: string): boolean =>
  (range.type === '*' || range.type === type) && (range.subtype === '*' || range.subtype === subtype)

/** Quality that the client gives a media type: that of the most specific range that covers it (RFC 9110 section 12.5.1). */
function quality(ranges: readonly Range[], media: string): number {
  const [type = '', subtype = ''] = media.split('/')
  return ranges.filter((range) => covers(range, type, subtype)).sort((a, b) => b.specific - a.specific)[0]?.q ?? 0
}

/** Format by the `format` parameter, else by Accept; of equal qualities the first of `formats`. 406 with the list where none fits. */
export function chooseFormat(formats: readonly Format[], asked: unknown, accept: string | null): Format {
  if (typeof asked === 'string') return asked as Format
  if (accept === null || accept === '' || accept === '*/*') return 'json'
  const ranges = readAccept(accept)
  let best: Format | null = null
  let most = 0
  for (const format of formats) {
    const q = quality(ranges, MEDIA_TYPES[format])
    if (q > most) {
      best = format
      most = q
    }
  }
  if (best !== null) return best
  const list = formats.map((format) => MEDIA_TYPES[format])
  throw new Problem('not_acceptable', `This can be had as ${list.join(', ')}${formats.length > 1 ? ` (or format=${formats.join('|')})` : ''}.`, { extra: { available: list } })
}
