/** The faces of the drawing, by the names the page has loaded them under. */
export const FACE_NAMES = [
  'HankenGrotesk_500Medium',
  'HankenGrotesk_600SemiBold',
  'ChivoMono_400Regular',
  'ChivoMono_500Medium',
  'ChivoMono_600SemiBold',
] as const;
export type FaceName = (typeof FACE_NAMES)[number];
export type FaceFiles = Partial<Record<FaceName, Uint8Array>>;

/** Where the page's own style sheets take a face from: the drawing uses the same file, already in the browser's cache. */
function addressOf(name: string): string | null {
  for (const sheet of document.styleSheets) {
    let rules: CSSRuleList;
    try {
      rules = sheet.cssRules;
    } catch {
      continue; // a sheet of another origin (a browser extension's)
    }
    for (const rule of rules) {
      if (!(rule instanceof CSSFontFaceRule)) continue;
      const style = rule.style as CSSStyleDeclaration;
      const family = style.getPropertyValue('font-family').replace(/["']/g, '').trim();
      const address = /url\(["']?([^"')]+)/.exec(style.getPropertyValue('src'))?.[1];
      if (family === name && address) return new URL(address, document.baseURI).href;
    }
  }
  return null;
}

async function loadFace(name: FaceName): Promise<[FaceName, Uint8Array] | null> {
  const address = addressOf(name);
  if (!address) return null;
  const response = await fetch(address);
  return response.ok ? [name, new Uint8Array(await response.arrayBuffer())] : null;
}

/** The faces' files; one that does not load is left out, and the drawing goes on without its words. */
export async function loadFaces(): Promise<FaceFiles> {
  const loaded = await Promise.all(FACE_NAMES.map((name) => loadFace(name).catch(() => null)));
  return Object.fromEntries(loaded.filter((face) => face !== null)) as FaceFiles;
}
