/** How XML documents start here; a character that XML 1.0 forbids becomes the replacement character. */
export const XML = { version: '1.0', encoding: 'UTF-8', invalidCharReplacement: '\uFFFD' } as const
