/** Hands a file made in the browser to the person. */
export function saveFile(
  fileName: string,
  content: Blob | string,
  type = 'text/plain;charset=utf-8',
): void {
  const blob = typeof content === 'string' ? new Blob([content], { type }) : content;
  const url = URL.createObjectURL(blob);
  const link = document.createElement('a');
  link.href = url;
  link.download = safeFileName(fileName);
  link.click();
  setTimeout(() => URL.revokeObjectURL(url), 10_000);
}

/** Letters, digits, dots, dashes; what lies between becomes one dash. */
export const safeFileName = (name: string): string =>
  name
    .normalize('NFC')
    .replace(/[^\p{L}\p{N}._-]+/gu, '-')
    .replace(/^-+|-+$/g, '')
    .slice(0, 120) || 'selvage';

/** @returns false when the browser refuses, for example without https. */
export async function copyText(text: string): Promise<boolean> {
  try {
    await navigator.clipboard.writeText(text);
    return true;
  } catch {
    return copyByCommand(text);
  }
}

/** The old way: the clipboard of a page without https. */
function copyByCommand(text: string): boolean {
  const area = document.createElement('textarea');
  area.value = text;
  area.style.position = 'fixed';
  area.style.opacity = '0';
  document.body.append(area);
  area.select();
  const copied = document.execCommand('copy');
  area.remove();
  return copied;
}
