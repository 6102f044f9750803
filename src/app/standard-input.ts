/** The name that stands for standard input among the names of files. */
export const STANDARD_INPUT = '-';

/** A file as people call it. */
export function spokenFile(file: string): string {
  return file === STANDARD_INPUT ? 'standard input' : file;
}
