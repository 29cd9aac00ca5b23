/** Joins class names and leaves out what is not set. */
export const classNames = (...names: (string | false | null | undefined)[]): string | undefined => names.filter(Boolean).join(" ") || undefined;
