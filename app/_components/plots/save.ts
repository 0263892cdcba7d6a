/** Replaces every `var(--name)` with the value the page gives it now, so that the picture stands on its own. */
function settleVariables(markup: string, styles: CSSStyleDeclaration): string {
  return markup.replace(/var\((--[\w-]+)(?:,[^)]*)?\)/g, (_, name: string) => styles.getPropertyValue(name).trim() || 'currentColor')
}

async function asDataUrl(url: string): Promise<string> {
  const blob = await (await fetch(url)).blob()
  return new Promise((resolve, reject) => {
    const reader = new FileReader()
    reader.onload = () => resolve(String(reader.result))
    reader.onerror = () => reject(new Error('The font could not be read.'))
    reader.readAsDataURL(blob)
  })
}

/** The page's own @font-face rules for the families used in the picture, with the Latin files written into them. */
async function fontRules(markup: string): Promise<string> {
  const rules: string[] = []
  for (const sheet of Array.from(document.styleSheets)) {
    let list: CSSRuleList
    try {
      list = sheet.cssRules
    } catch {
      continue // A sheet from elsewhere may not be read; it is not one of ours.
    }
    for (const rule of Array.from(list)) {
      if (!(rule instanceof CSSFontFaceRule)) continue
      const family = rule.style.getPropertyValue('font-family').replace(/["']/g, '')
      const range = rule.style.getPropertyValue('unicode-range')
      const url = /url\(["']?([^"')]+)["']?\)/.exec(rule.style.getPropertyValue('src'))?.[1]
      const wanted = markup.includes(family) && (range === '' || /U\+0{0,4}-0?0?FF/i.test(range) || /U\+0?370/i.test(range))
      if (!wanted || !url || rule.style.getPropertyValue('font-style') === 'italic') continue
      const data = await asDataUrl(new URL(url, sheet.href ?? document.baseURI).href)
      const weight = rule.style.getPropertyValue('font-weight') || '400'
      rules.push(`@font-face{font-family:'${family}';font-weight:${weight};src:url(${data})${range ? `;unicode-range:${range}` : ''}}`)
    }
  }
  return rules.join('')
}

/** The drawing as a file of its own: colours settled, fonts inside, a sheet of paper behind, size in px. */
export async function standaloneSvg(svg: SVGSVGElement): Promise<string> {
  const copy = svg.cloneNode(true) as SVGSVGElement
  const { width, height } = svg.viewBox.baseVal
  copy.setAttribute('xmlns', 'http://www.w3.org/2000/svg')
  copy.setAttribute('width', String(width))
  copy.setAttribute('height', String(height))
  copy.removeAttribute('class')
  copy.removeAttribute('style')
  copy.querySelectorAll('[data-screen-only]').forEach((element) => element.remove())
  copy.querySelectorAll('[tabindex]').forEach((element) => element.removeAttribute('tabindex'))
  const sheet = document.createElementNS('http://www.w3.org/2000/svg', 'rect')
  sheet.setAttribute('width', String(width))
  sheet.setAttribute('height', String(height))
  sheet.setAttribute('fill', 'var(--sheet)')
  copy.insertBefore(sheet, copy.firstChild)
  const markup = settleVariables(new XMLSerializer().serializeToString(copy), getComputedStyle(svg))
  const fonts = await fontRules(markup)
  return fonts === '' ? markup : markup.replace(/(<svg[^>]*>)/, `$1<defs><style>${fonts}</style></defs>`)
}

function download(blob: Blob, fileName: string): void {
  const address = URL.createObjectURL(blob)
  const link = document.createElement('a')
  link.href = address
  link.download = fileName
  link.click()
  // The browser has taken hold of the address by the next turn; freeing it at once would cancel the download.
  setTimeout(() => URL.revokeObjectURL(address), 10_000)
}

export async function saveSvg(svg: SVGSVGElement, name: string): Promise<void> {
  download(new Blob([await standaloneSvg(svg)], { type: 'image/svg+xml' }), `${name}.svg`)
}

/** The same drawing as a bitmap at three times its size on the page, which prints sharply in a column. */
export async function savePng(svg: SVGSVGElement, name: string, times = 3): Promise<void> {
  const { width, height } = svg.viewBox.baseVal
  const image = new Image()
  image.src = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(await standaloneSvg(svg))}`
  await image.decode()
  const canvas = document.createElement('canvas')
  canvas.width = Math.round(width * times)
  canvas.height = Math.round(height * times)
  const context = canvas.getContext('2d')
  if (!context) throw new Error('This browser gives no drawing surface.')
  context.scale(times, times)
  context.drawImage(image, 0, 0, width, height)
  const blob = await new Promise<Blob | null>((resolve) => canvas.toBlob(resolve, 'image/png'))
  if (!blob) throw new Error('This browser could not make a PNG.')
  download(blob, `${name}.png`)
}
