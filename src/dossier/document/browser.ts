/** A document to draw plots in: the page's own. In a worker there is none, so render on the page. */
export function plotDocument(): Document {
  return globalThis.document;
}
