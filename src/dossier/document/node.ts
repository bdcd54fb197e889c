/** A document to draw plots in, where there is no page: Node. */
import { parseHTML } from "linkedom";

export function plotDocument(): Document {
  return parseHTML("<!doctype html><html><body></body></html>").document as unknown as Document;
}
