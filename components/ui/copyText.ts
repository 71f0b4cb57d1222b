/** Copies text; on a plain-http address other than localhost a browser has no clipboard, so a selection does it. */
export async function copyText(text: string): Promise<boolean> {
  try {
    if (navigator.clipboard) {
      await navigator.clipboard.writeText(text);
      return true;
    }
  } catch {
    // refused by the browser: try the selection
  }
  const area = document.createElement('textarea');
  area.value = text;
  area.style.position = 'fixed';
  area.style.opacity = '0';
  document.body.appendChild(area);
  area.select();
  const done = document.execCommand('copy');
  area.remove();
  return done;
}
