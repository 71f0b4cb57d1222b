import { showToast } from './toast';

/** Copies text; on a plain-http address other than localhost a browser has no clipboard, so a selection does it. */
async function copyText(text: string): Promise<boolean> {
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

/** Copies and says so, or says that the browser refused. */
export async function copyAndSay(text: string, said: string): Promise<void> {
  showToast((await copyText(text)) ? said : 'Copying was refused');
}
