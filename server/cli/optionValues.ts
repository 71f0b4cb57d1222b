/** A wrong value of an option; its message is for people. */
export class Wrong extends Error {}

/** The number that an option was given, within its limits. */
export function number(name: string, text: string, least: number, most: number, isWhole = false): number {
  const value = Number(text);
  if (
    text.trim() === '' ||
    !Number.isFinite(value) ||
    value < least ||
    value > most ||
    (isWhole && !Number.isInteger(value))
  )
    throw new Wrong(`--${name} is a${isWhole ? ' whole' : ''} number from ${least} to ${most}`);
  return value;
}

/** What is said of a command line that could not be read. */
export function wordsOfWrong(error: unknown): string {
  if (error instanceof Wrong) return error.message;
  return (error as Error).message.split('. ')[0] ?? 'The command line could not be read';
}
