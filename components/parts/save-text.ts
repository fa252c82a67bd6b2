/** Hands a text to the browser as a file to save. */
export const saveText = (fileName: string, mediaType: string, text: string): void =>
  saveBlob(fileName, new Blob([text], { type: `${mediaType};charset=utf-8` }));

export function saveBlob(fileName: string, blob: Blob): void {
  const address = URL.createObjectURL(blob);
  const link = document.createElement("a");
  link.href = address;
  link.download = fileName;
  document.body.append(link);
  link.click();
  link.remove();
  URL.revokeObjectURL(address);
}
