/** 128 random bits in hex. `crypto.randomUUID` needs https, which an instance on a local network may lack. */
export function randomKey(): string {
  const bytes = crypto.getRandomValues(new Uint8Array(16));
  return Array.from(bytes, (byte) => byte.toString(16).padStart(2, '0')).join('');
}
