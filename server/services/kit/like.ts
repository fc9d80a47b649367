/** A pattern for SQL LIKE that finds the text anywhere, whatever is in it. SQLite has no default escape, so none is used. */
export const containing = (text: string) => `%${text.replace(/[%_]/g, '_')}%`
