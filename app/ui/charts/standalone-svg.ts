const resolvedProperties = [
  'fill',
  'fill-opacity',
  'stroke',
  'stroke-width',
  'stroke-opacity',
  'stroke-dasharray',
  'font-size',
  'font-weight',
  'text-anchor',
  'paint-order',
]

interface Face {
  variable: string
  name: string
  generic: string
}

const mono: Face = { variable: '--face-mono', name: 'Red Hat Mono', generic: 'monospace' }
const sans: Face = { variable: '--face-text', name: 'Instrument Sans', generic: 'sans-serif' }

/**
 * A drawn plot as a file of its own: every colour resolved, in the light dress whatever the screen wears,
 * without its passing marks, with its faces carried inside so that it looks the same where they are unknown.
 */
export async function standaloneSvg(drawn: SVGSVGElement): Promise<string> {
  const { copy, faces } = copyInLightDress(drawn)
  const { width, height } = drawn.viewBox.baseVal
  copy.setAttribute('xmlns', 'http://www.w3.org/2000/svg')
  copy.setAttribute('width', String(width))
  copy.setAttribute('height', String(height))

  const ground = document.createElementNS('http://www.w3.org/2000/svg', 'rect')
  ground.setAttribute('width', '100%')
  ground.setAttribute('height', '100%')
  ground.setAttribute('fill', '#ffffff')
  // Only now that the copy is out of the page: the page's policy allows no style element in it.
  const style = document.createElementNS('http://www.w3.org/2000/svg', 'style')
  style.textContent = (await Promise.all([...faces].map(fontFaceRule))).join('')
  copy.prepend(style, ground)
  return new XMLSerializer().serializeToString(copy)
}

/** The drawing as an image of twice its size, for slides and documents that take no SVG. */
export async function pngFromSvg(markup: string, { width, height }: DOMRect): Promise<Blob> {
  const image = new Image()
  image.src = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(markup)}`
  await image.decode()
  const canvas = document.createElement('canvas')
  canvas.width = width * 2
  canvas.height = height * 2
  canvas.getContext('2d')?.drawImage(image, 0, 0, canvas.width, canvas.height)
  return new Promise((done, fail) => {
    canvas.toBlob((blob) => (blob ? done(blob) : fail(new Error('The canvas gave no image.'))), 'image/png')
  })
}

/** Styles can be computed only of what is in the page, so the copy stands in it for a moment, out of sight. */
function copyInLightDress(drawn: SVGSVGElement) {
  const stage = document.createElement('div')
  stage.dataset.theme = 'light'
  stage.style.position = 'absolute'
  stage.style.left = '-99999px'
  const copy = drawn.cloneNode(true) as SVGSVGElement
  stage.append(copy)
  document.body.append(stage)
  const faces = new Set<Face>()
  copy.querySelectorAll('[data-transient]').forEach((mark) => mark.remove())
  const elements = [copy, ...copy.querySelectorAll<SVGElement>('*')]
  for (const element of elements) resolve(element, faces)
  // Last, since classes and styles are what the values above were inherited from.
  for (const element of elements) strip(element)
  stage.remove()
  return { copy, faces }
}

function resolve(element: SVGElement, faces: Set<Face>) {
  const computed = getComputedStyle(element)
  // Only what the drawing says itself: every inherited value on every element would double the file.
  for (const property of resolvedProperties) {
    if (element.hasAttribute(property)) element.setAttribute(property, computed.getPropertyValue(property))
  }
  if (element.tagName === 'text') {
    const face = computed.fontFamily.includes('monospace') ? mono : sans
    faces.add(face)
    element.setAttribute('font-family', `'${face.name}', ${face.generic}`)
  }
}

function strip(element: SVGElement) {
  for (const attribute of ['class', 'style', 'tabindex', 'data-cell']) element.removeAttribute(attribute)
  if (element.tagName !== 'text') element.removeAttribute('font-family')
}

/** A @font-face rule holding the very file that the page has loaded; empty if the page never did. */
async function fontFaceRule(face: Face): Promise<string> {
  const loaded = getComputedStyle(document.documentElement).getPropertyValue(face.variable)
  const family = unquoted(loaded.split(',')[0] ?? '')
  const rule = Array.from(document.styleSheets)
    .flatMap((sheet) => Array.from(sheet.cssRules))
    .find(
      (candidate): candidate is CSSFontFaceRule =>
        candidate instanceof CSSFontFaceRule &&
        unquoted(candidate.style.getPropertyValue('font-family')) === family,
    )
  const address = /url\("?([^")]+)"?\)/.exec(rule?.style.getPropertyValue('src') ?? '')?.[1]
  if (!rule || !address) return ''

  const sheet = rule.parentStyleSheet?.href ?? document.baseURI
  const file = await (await fetch(new URL(address, sheet))).blob()
  const weight = rule.style.getPropertyValue('font-weight')
  return `@font-face{font-family:'${face.name}';font-weight:${weight};src:url(${await dataUrl(file)}) format('woff2')}`
}

function unquoted(family: string): string {
  return family.trim().replace(/^["']|["']$/g, '')
}

function dataUrl(file: Blob): Promise<string> {
  return new Promise((done, fail) => {
    const reader = new FileReader()
    reader.onload = () => done(String(reader.result))
    reader.onerror = () => fail(reader.error ?? new Error('The font could not be read.'))
    reader.readAsDataURL(file)
  })
}
