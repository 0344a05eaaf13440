// Drawings from the core, put on the page part by part. Only what is on the lists below gets through, so that a
// drawing can carry no script, no style and no address.

const SVG = "http://www.w3.org/2000/svg";
const ELEMENTS = new Set(["svg", "g", "path", "line", "polyline", "polygon", "rect", "circle", "ellipse", "text", "tspan", "title", "desc", "defs", "clippath", "pattern", "marker"]);
const ATTRIBUTES = new Set(
  (
    "class id x y x1 y1 x2 y2 cx cy r rx ry d points width height viewbox preserveaspectratio transform fill stroke stroke-width " +
    "stroke-dasharray stroke-linecap stroke-linejoin stroke-miterlimit fill-rule clip-rule opacity fill-opacity stroke-opacity font-size " +
    "text-anchor dominant-baseline dx dy rotate clip-path patternunits patterntransform patterncontentunits clippathunits marker-start " +
    "marker-end markerwidth markerheight refx refy orient markerunits vector-effect role aria-label aria-hidden xmlns font-weight font-style font-family paint-order data-part"
  ).split(" "),
);
/** A value may point inside the drawing, and nowhere else. */
const LOCAL_URL = /^url\(#[\w-]+\)$/;
const KEPT_DRAWINGS = 200;

const kept = new Map<string, SVGSVGElement | null>();

/** The drawing as an element, or null when the text is not a drawing. The same text gives a fresh copy each time. */
export function drawingOf(text: string): SVGSVGElement | null {
  // An empty text would make the parser write a page of its own, with styles that the policy forbids.
  if (text === "") return null;
  if (!kept.has(text)) {
    if (kept.size >= KEPT_DRAWINGS) kept.clear();
    kept.set(text, read(text));
  }
  return (kept.get(text)?.cloneNode(true) as SVGSVGElement | undefined) ?? null;
}

function read(text: string): SVGSVGElement | null {
  const parsed = new DOMParser().parseFromString(text, "image/svg+xml");
  const root = parsed.documentElement;
  if (parsed.querySelector("parsererror") !== null || root.localName !== "svg" || root.namespaceURI !== SVG) return null;
  return copy(root) as SVGSVGElement | null;
}

function copy(from: Element): Element | null {
  if (from.namespaceURI !== SVG || !ELEMENTS.has(from.localName.toLowerCase())) return null;
  const to = document.createElementNS(SVG, from.localName);
  for (const { name, value } of from.attributes) {
    if (!ATTRIBUTES.has(name.toLowerCase()) || name === "xmlns") continue;
    if (/url\(|javascript:|data:/i.test(value) && !LOCAL_URL.test(value)) continue;
    to.setAttribute(name, value);
  }
  for (const child of from.childNodes) {
    if (child.nodeType === Node.TEXT_NODE) to.append(child.textContent ?? "");
    else if (child.nodeType === Node.ELEMENT_NODE) {
      const inner = copy(child as Element);
      if (inner !== null) to.append(inner);
    }
  }
  return to;
}
