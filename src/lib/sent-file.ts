/** A file of a form as bytes with its name; undefined where none was sent. */
export async function sentFile(
  file: File | undefined,
): Promise<{ bytes: Uint8Array; name: string } | undefined> {
  return file === undefined
    ? undefined
    : { bytes: new Uint8Array(await file.arrayBuffer()), name: file.name };
}
