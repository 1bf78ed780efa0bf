/**
 * The policy for places that are not ours and hand plain text to the browser: workers started by address and the editor's loader
 * tag. It lets through our own files only; everything else throws. Must run before anything else.
 */
interface PolicyFactory {
  createPolicy(
    name: string,
    rules: { createScriptURL(url: string): string; createHTML(html: string): string },
  ): unknown;
}

const OWN_SCRIPT = /^\/(assets\/monaco\/.+|[\w.-]+)\.js$/;

const factory = (globalThis as { trustedTypes?: PolicyFactory }).trustedTypes;
factory?.createPolicy('default', {
  createScriptURL(url) {
    const { origin, pathname } = new URL(url, document.baseURI);
    if (origin === location.origin && OWN_SCRIPT.test(pathname)) return url;
    throw new TypeError(`no script of ours: ${pathname}`);
  },
  createHTML(html) {
    if (html === '') return html;
    throw new TypeError('no markup from text');
  },
});
