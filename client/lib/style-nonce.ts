/** The page's nonce for styles made by libraries (server/http/page.ts); empty where the policy asks for none. */
export const styleNonce = (): string =>
  document.querySelector<HTMLMetaElement>('meta[property="csp-nonce"]')?.nonce ?? ''
