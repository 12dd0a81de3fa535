// SPDX-License-Identifier: GPL-3.0-or-later
// Runs in the parent of the frames that hold the page under test; what it finds goes as JSON, by frame, into the element "found".
// LEAST: the contrast wanted.
"use strict";

// ---- Colours, after WCAG 2.2 (relative luminance, contrast ratio) ----

function rgba(colour) {
  const numbers = colour.match(/[\d.]+/g);
  if (!numbers || !colour.startsWith("rgb")) return [0, 0, 0, 0];
  return [numbers[0] / 255, numbers[1] / 255, numbers[2] / 255, numbers.length > 3 ? +numbers[3] : 1];
}

const over = (above, below) => [0, 1, 2].map((i) => above[i] * above[3] + below[i] * (1 - above[3])).concat(1);

function luminance(colour) {
  const linear = colour.slice(0, 3).map((c) => (c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4));
  return 0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2];
}

function contrast(a, b) {
  const [high, low] = [luminance(a), luminance(b)].sort((x, y) => y - x);
  return (high + 0.05) / (low + 0.05);
}

// What is behind an element: the backgrounds of itself and those it stands in, over the canvas.
function behind(view, element, canvas) {
  const layers = [];
  for (let e = element; e; e = e.parentElement) layers.push(rgba(view.getComputedStyle(e).backgroundColor));
  return layers.reverse().reduce((below, layer) => over(layer, below), canvas);
}

// In a drawing, also the rectangles drawn before it on which it stands whole, as far as it isn't cut off at the drawing's edge.
function behindInDrawing(view, element, canvas) {
  const drawing = element.closest("svg"), own = element.getBoundingClientRect(), frame = drawing.getBoundingClientRect();
  const box = { left: Math.max(own.left, frame.left), right: Math.min(own.right, frame.right), top: Math.max(own.top, frame.top), bottom: Math.min(own.bottom, frame.bottom) };
  let below = behind(view, drawing, canvas);
  for (const shape of drawing.querySelectorAll("rect")) {
    if (!(shape.compareDocumentPosition(element) & Node.DOCUMENT_POSITION_FOLLOWING)) break;
    const ground = shape.getBoundingClientRect(), style = view.getComputedStyle(shape);
    if (shape.closest("defs, clipPath, mask") || ground.left > box.left || ground.right < box.right || ground.top > box.top || ground.bottom < box.bottom) continue;
    const fill = rgba(style.fill);
    fill[3] *= style.fillOpacity * style.opacity;
    below = over(fill, below);
  }
  return below;
}

// ---- The page ----

function described(element) {
  const text = (element.textContent || "").trim().replace(/\s+/g, " ").slice(0, 40);
  return `<${element.tagName.toLowerCase()}${element.id ? " id=" + element.id : ""}> ${text}`;
}

function visible(view, element) {
  const style = view.getComputedStyle(element);
  return style.visibility === "visible" && style.display !== "none" && element.getClientRects().length > 0;
}

function texts(view, page) {
  const walker = page.createTreeWalker(page.body, NodeFilter.SHOW_TEXT), found = [];
  while (walker.nextNode()) {
    const element = walker.currentNode.parentElement;
    if (walker.currentNode.data.trim() && !element.closest("script, style, title, desc") && visible(view, element)) found.push(element);
  }
  return [...new Set(found)];
}

function poorContrast(view, page, list) {
  const dark = view.matchMedia("(prefers-color-scheme: dark)").matches && view.getComputedStyle(page.documentElement).colorScheme.includes("dark");
  const canvas = dark ? [0.07, 0.07, 0.07, 1] : [1, 1, 1, 1], found = [];
  for (const element of list) {
    const style = view.getComputedStyle(element), drawn = element instanceof view.SVGElement;
    const back = drawn ? behindInDrawing(view, element, canvas) : behind(view, element, canvas);
    const ink = rgba(drawn ? style.fill : style.color);
    ink[3] *= +style.opacity;
    const ratio = contrast(over(ink, back), back);
    if (!(ratio >= LEAST)) found.push(`${ratio.toFixed(2)}: ${described(element)}`);
  }
  return found;
}

// What makes the page wider than its window: elements that no ancestor scrolls or clips.
function tooWide(view, page) {
  const width = view.innerWidth, found = [];
  if (page.documentElement.scrollWidth > width) found.push(`the page is ${page.documentElement.scrollWidth} px wide`);
  for (const element of page.body.querySelectorAll("*")) {
    if (element.getBoundingClientRect().right <= width + 1 || !visible(view, element)) continue;
    let inside = false;
    for (let e = element.parentElement; e; e = e.parentElement) inside = inside || view.getComputedStyle(e).overflowX !== "visible";
    if (!inside) found.push("reaches beyond the window: " + described(element));
  }
  return found;
}

function alternatives(page) {
  const found = [];
  for (const image of page.querySelectorAll("img, area, input[type=image]")) if (!image.hasAttribute("alt")) found.push("no alt: " + image.outerHTML.slice(0, 80));
  for (const drawing of page.querySelectorAll("svg")) {
    if (drawing.closest("[aria-hidden=true]") || drawing.parentElement.closest("svg")) continue;
    const label = drawing.getAttribute("aria-label") || (drawing.querySelector(":scope > title") || {}).textContent;
    const named = drawing.getAttribute("aria-labelledby");
    if (!(label && label.trim()) && !(named && named.split(/\s+/).every((id) => page.getElementById(id)))) found.push("no title or aria-label: " + drawing.outerHTML.slice(0, 80));
  }
  for (const box of page.querySelectorAll("object, canvas, video, iframe")) if (!box.getAttribute("aria-label") && !box.title && !box.textContent.trim()) found.push("no alternative: " + described(box));
  return found;
}

function headings(page) {
  const found = [], list = [...page.querySelectorAll("h1, h2, h3, h4, h5, h6")];
  if (list.filter((h) => h.tagName === "H1").length !== 1) found.push("there is not one h1");
  let before = 0;
  for (const heading of list) {
    const level = +heading.tagName[1];
    if (level > before + 1) found.push("skips a level: " + described(heading));
    if (!heading.textContent.trim()) found.push("empty: " + described(heading));
    before = level;
  }
  return found;
}

function tables(page) {
  const found = [];
  for (const table of page.querySelectorAll("table")) {
    if (!table.querySelector("th")) found.push("no header: " + described(table));
    for (const header of table.querySelectorAll("th")) if (!header.scope) found.push("a header without scope: " + described(header));
  }
  return found;
}

function documentItself(page) {
  const found = [];
  if (!page.documentElement.lang) found.push("no lang");
  if (!page.title.trim()) found.push("no title");
  if (!page.querySelector('meta[name="viewport"]')) found.push("no viewport for phones");
  if (!page.characterSet || page.characterSet !== "UTF-8") found.push("not UTF-8");
  return found;
}

function idsTwice(page) {
  const seen = new Set(), found = [];
  for (const element of page.querySelectorAll("[id]")) seen.has(element.id) ? found.push(element.id) : seen.add(element.id);
  return [found, [...seen]];
}

// Requests that the page made or would make, besides for itself.
function asked(view, page) {
  const found = view.performance.getEntriesByType("resource").map((entry) => entry.name).filter((name) => !name.startsWith("data:"));
  for (const element of page.querySelectorAll("[src], link[href]")) {
    const name = element.getAttribute("src") || element.getAttribute("href");
    if (name && !name.startsWith("data:") && !name.startsWith("#")) found.push(name);
  }
  return found;
}

function measure(frame) {
  const view = frame.contentWindow, page = frame.contentDocument;
  const folded = tooWide(view, page);
  page.querySelectorAll("details").forEach((d) => { d.open = true; });
  const list = texts(view, page), [twice, ids] = idsTwice(page);
  return {
    dark: view.matchMedia("(prefers-color-scheme: dark)").matches, texts: list.length, contrast: poorContrast(view, page, list), wide: [...new Set(folded.concat(tooWide(view, page)))], asked: asked(view, page),
    links: [...page.querySelectorAll("a[href], area[href]")].map((a) => a.getAttribute("href")), ids, twice,
    alternatives: alternatives(page), headings: headings(page), tables: tables(page), document: documentItself(page),
    scripts: [...page.querySelectorAll("script")].map(described),
  };
}

window.addEventListener("load", () => {
  const found = {};
  for (const frame of document.querySelectorAll("iframe")) found[frame.id] = measure(frame);
  document.getElementById("found").textContent = JSON.stringify(found);
});
