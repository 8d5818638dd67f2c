import { LABEL_PX } from './chart-styles.ts';
import { wrapText } from './text-width.ts';
import { resolveTokens, tokenValue } from './theme-colours.ts';

const SVG_NS = 'http://www.w3.org/2000/svg';
const CAPTION_LINE_PX = 16;

export interface ExportParts {
  title: string;
  description: string;
  caption?: string;
  /** SVG markup laid under the drawing: what a canvas shows on screen. */
  under?: string;
}

function resolveAttributes(root: Element): void {
  for (const element of [root, ...root.querySelectorAll('*')]) {
    for (const attribute of [...element.attributes]) {
      if (attribute.value.includes('var(--')) element.setAttribute(attribute.name, resolveTokens(attribute.value));
    }
  }
}

function element(name: string, attributes: Record<string, string | number>, text = ''): SVGElement {
  const node = document.createElementNS(SVG_NS, name);
  for (const [key, value] of Object.entries(attributes)) node.setAttribute(key, String(value));
  node.textContent = text;
  return node;
}

function captionNodes(caption: string, width: number, top: number): SVGElement[] {
  const style = `font: 400 ${LABEL_PX}px var(--font-ui); fill: var(--ink-3)`;
  return wrapText(caption, width - 24, LABEL_PX, 4).map((line, index) =>
    element('text', { x: 12, y: top + 12 + index * CAPTION_LINE_PX, style }, line),
  );
}

/** A copy of a live chart that stands alone: tokens resolved, ground, title and caption drawn in. */
export function standaloneSvg(live: SVGSVGElement, parts: ExportParts): SVGSVGElement {
  const width = Number(live.getAttribute('width') ?? 640);
  const height = Number(live.getAttribute('height') ?? 320);
  const notes = parts.caption === undefined ? [] : captionNodes(parts.caption, width, height + 4);
  const fullHeight = height + (notes.length > 0 ? notes.length * CAPTION_LINE_PX + 12 : 0);
  const copy = document.createElementNS(SVG_NS, 'svg');
  const size = { width, height: fullHeight, viewBox: `0 0 ${width} ${fullHeight}`, role: 'img' };
  for (const [key, value] of Object.entries(size)) copy.setAttribute(key, String(value));
  copy.append(element('title', {}, parts.title), element('desc', {}, parts.description));
  copy.append(element('rect', { width, height: fullHeight, fill: 'var(--sheet)' }));
  if (parts.under !== undefined) {
    const under = document.createElementNS(SVG_NS, 'g');
    under.innerHTML = parts.under;
    copy.append(under);
  }
  for (const child of live.childNodes) copy.append(child.cloneNode(true));
  for (const screenOnly of copy.querySelectorAll('[data-screen-only]')) screenOnly.remove();
  copy.append(...notes);
  resolveAttributes(copy);
  return copy;
}

async function asDataUrl(url: string): Promise<string> {
  const blob = await (await fetch(url)).blob();
  return new Promise((resolve, reject) => {
    const reader = new FileReader();
    reader.onload = () => resolve(typeof reader.result === 'string' ? reader.result : '');
    reader.onerror = () => reject(reader.error ?? new Error('The font could not be read.'));
    reader.readAsDataURL(blob);
  });
}

function faceRules(): CSSFontFaceRule[] {
  return [...document.styleSheets].flatMap((sheet) => {
    try {
      return [...sheet.cssRules].filter((rule) => rule instanceof CSSFontFaceRule);
    } catch {
      return []; // a sheet of another origin may not be read; the export then falls back to system type
    }
  });
}

/** The Latin faces of the families a drawing names, as @font-face rules with the files inlined. */
async function embeddedFaces(markup: string): Promise<string> {
  const wanted = faceRules().filter((rule) => {
    const family = rule.style.getPropertyValue('font-family').replace(/["']/g, '');
    const range = rule.style.getPropertyValue('unicode-range');
    const latin = range === '' || /U\+0{0,4}-0*FF\b/i.test(range);
    return latin && !/italic/.test(rule.style.getPropertyValue('font-style')) && markup.includes(family);
  });
  const texts = await Promise.all(
    wanted.map(async (rule) => {
      const url = /url\(["']?([^"')]+)["']?\)/.exec(rule.style.getPropertyValue('src'))?.[1];
      if (url === undefined) return '';
      const data = url.startsWith('data:') ? url : await asDataUrl(new URL(url, document.baseURI).href);
      return rule.cssText.replace(/src:[^;]+;/, `src: url(${data});`);
    }),
  );
  return texts.join('\n');
}

/** The chart as an SVG document in text, with its fonts inside. */
export async function svgDocument(live: SVGSVGElement, parts: ExportParts): Promise<string> {
  const copy = standaloneSvg(live, parts);
  const faces = await embeddedFaces(copy.outerHTML);
  if (faces !== '') copy.prepend(element('style', {}, faces));
  return new XMLSerializer().serializeToString(copy);
}

/** The chart as a PNG of `scale` times its size on screen. */
export async function pngBlob(live: SVGSVGElement, parts: ExportParts, scale = 2): Promise<Blob> {
  const text = await svgDocument(live, parts);
  const url = URL.createObjectURL(new Blob([text], { type: 'image/svg+xml' }));
  try {
    const image = new Image();
    image.src = url;
    await image.decode();
    const canvas = document.createElement('canvas');
    canvas.width = image.width * scale;
    canvas.height = image.height * scale;
    const context = canvas.getContext('2d');
    if (context === null) throw new Error('This browser gives no canvas to draw the picture on.');
    context.fillStyle = tokenValue('--sheet');
    context.fillRect(0, 0, canvas.width, canvas.height);
    context.drawImage(image, 0, 0, canvas.width, canvas.height);
    return await new Promise((resolve, reject) => {
      canvas.toBlob((blob) => (blob === null ? reject(new Error('The picture is too large for a PNG; take the SVG.')) : resolve(blob)), 'image/png');
    });
  } finally {
    URL.revokeObjectURL(url);
  }
}
