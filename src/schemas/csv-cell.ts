/** What a spreadsheet takes for a formula (OWASP, "CSV Injection"): = + - @ tab, carriage return, and full-width forms. */
const FORMULA_START = /^[\s]*[=+\-@\t\r\uFF1D\uFF0B\uFF0D\uFF20]/;

/** Text as it may stand in a cell of a file for spreadsheets: what they would run gets an apostrophe in front. */
export const harmlessCell = (text: string): string => (FORMULA_START.test(text) ? `'${text}` : text);
