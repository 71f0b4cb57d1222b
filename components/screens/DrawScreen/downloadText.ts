/** Hands a text to the person as a file. */
export function downloadText(name: string, text: string): void {
  const address = URL.createObjectURL(new Blob([text], { type: 'application/json' }));
  const link = document.createElement('a');
  link.href = address;
  link.download = name;
  link.click();
  // The browser has read the address once the click is through.
  setTimeout(() => URL.revokeObjectURL(address), 1000);
}
