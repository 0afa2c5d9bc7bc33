const signatures: readonly { readonly bytes: readonly number[]; readonly is: string }[] = [
  { bytes: [0x89, 0x50, 0x4e, 0x47], is: 'a PNG picture' },
  { bytes: [0xff, 0xd8, 0xff], is: 'a JPEG picture' },
  { bytes: [0x47, 0x49, 0x46, 0x38], is: 'a GIF picture' },
  { bytes: [0x25, 0x50, 0x44, 0x46], is: 'a PDF document' },
  { bytes: [0xd0, 0xcf, 0x11, 0xe0], is: 'a workbook or document of an older office program' },
  { bytes: [0x1f, 0x8b], is: 'a compressed file (gzip)' },
  { bytes: [0xff, 0xfe], is: 'text in UTF-16' },
  { bytes: [0xfe, 0xff], is: 'text in UTF-16' },
];

const zip = [0x50, 0x4b, 0x03, 0x04];

/**
 * What a file is, from its first bytes, when it plainly is not a text file of this format.
 *
 * @returns words such as "a PNG picture"; null when nothing speaks against text.
 */
export function recogniseForeign(head: Uint8Array): string | null {
  if (startsWith(head, zip)) {
    const names = Buffer.from(head.buffer, head.byteOffset, head.byteLength).toString('latin1');
    return /xl\/|\[Content_Types\]/.test(names) ? 'a spreadsheet workbook' : 'a ZIP archive';
  }
  return signatures.find(({ bytes }) => startsWith(head, bytes))?.is ?? null;
}

function startsWith(head: Uint8Array, bytes: readonly number[]): boolean {
  return bytes.every((byte, index) => head[index] === byte);
}
