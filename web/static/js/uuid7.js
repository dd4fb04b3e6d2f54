// Identities of entries, made where they are typed: UUID version 7 (RFC 9562). getRandomValues and not
// randomUUID, which browsers offer over https alone.

/** uuid7 makes an identity whose first 48 bits are the instant in milliseconds. */
export function uuid7(ms = Date.now()) {
  const b = crypto.getRandomValues(new Uint8Array(16));
  for (let i = 0; i < 6; i++) b[i] = Math.floor(ms / 2 ** (8 * (5 - i))) % 256;
  b[6] = 0x70 | (b[6] & 0x0f);
  b[8] = 0x80 | (b[8] & 0x3f);
  const hex = [...b].map((x) => x.toString(16).padStart(2, "0")).join("");
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join("-");
}
