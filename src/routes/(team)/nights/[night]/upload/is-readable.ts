/** False where a file was moved, changed or taken away since it was dropped: browsers read none of it then. */
export async function isReadable(file: File): Promise<boolean> {
  try {
    await file.slice(0, 1).arrayBuffer();
    return true;
  } catch {
    return false;
  }
}
