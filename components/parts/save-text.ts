/** Hands a text to the browser as a file to save. */
export function saveText(fileName: string, mediaType: string, text: string): void {
  const address = URL.createObjectURL(new Blob([text], { type: `${mediaType};charset=utf-8` }));
  const link = document.createElement("a");
  link.href = address;
  link.download = fileName;
  document.body.append(link);
  link.click();
  link.remove();
  URL.revokeObjectURL(address);
}
