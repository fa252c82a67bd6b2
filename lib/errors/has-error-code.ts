/** Whether an error of the system (file, socket, process) carries this code, such as "ENOENT". */
export function hasErrorCode(error: unknown, code: string): boolean {
  return error instanceof Error && "code" in error && error.code === code;
}
