/** The face that every page needs first, for its preload. */
export { default as font } from '@fontsource-variable/inter-tight/files/inter-tight-latin-wght-normal.woff2?url';
