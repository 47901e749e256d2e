/**
 * Carries the path of a page from the proxy to the page, which is told its parameters but not its address. Only
 * used to come back after signing in, and read through `safePath`, since without the proxy anyone may set it.
 */
export const pagePathHeader = 'x-page-path'
