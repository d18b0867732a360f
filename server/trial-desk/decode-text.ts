/** A file's bytes as text, or null where they are no text. */
export function decodeText(bytes: Uint8Array): string | null {
  const text = decodeByMark(bytes) ?? decodeUtf8(bytes) ?? new TextDecoder('windows-1252').decode(bytes);
  return text.includes('\0') ? null : text;
}

/** Spreadsheets that save "Unicode text" write UTF-16 and say so in the first two bytes. */
function decodeByMark(bytes: Uint8Array): string | null {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return new TextDecoder('utf-16le').decode(bytes);
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return new TextDecoder('utf-16be').decode(bytes);
  return null;
}

/** Takes a byte-order mark off; null where the bytes are not UTF-8. */
function decodeUtf8(bytes: Uint8Array): string | null {
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    return null;
  }
}
