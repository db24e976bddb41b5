/** Looks that come from style sheets and must stand in the drawing itself once it leaves the page. */
const copiedProperties = [
  "fill",
  "fill-opacity",
  "stroke",
  "stroke-width",
  "stroke-opacity",
  "stroke-dasharray",
  "stroke-linecap",
  "stroke-linejoin",
  "opacity",
  "shape-rendering",
  "paint-order",
];

/** Pixels per CSS pixel: sharp on a slide. */
const resolution = 2;
const margin = { side: 16, top: 44, bottom: 12 };

type PictureOptions = { title: string; plot: HTMLElement };

/**
 * A chart as PNG: its drawings one over another, text painted anew with the page's own font (a drawing that stands
 * alone cannot use it), the title above.
 */
export const chartPicture = async ({ title, plot }: PictureOptions): Promise<Blob> => {
  const box = plot.getBoundingClientRect();
  const canvas = document.createElement("canvas");
  canvas.width = Math.ceil((box.width + 2 * margin.side) * resolution);
  canvas.height = Math.ceil((box.height + margin.top + margin.bottom) * resolution);
  const context = canvas.getContext("2d");
  if (!context) throw new Error("No canvas to draw on.");
  context.scale(resolution, resolution);
  const page = getComputedStyle(plot);
  context.fillStyle = page.getPropertyValue("--sheet") ? colourOf(plot, "--sheet") : "#fff";
  context.fillRect(0, 0, canvas.width, canvas.height);
  context.fillStyle = page.color;
  context.font = `600 15px ${page.fontFamily}`;
  context.fillText(title, margin.side, 27);
  context.translate(margin.side - box.left, margin.top - box.top);
  for (const drawing of plot.querySelectorAll<SVGSVGElement>("svg")) await paintDrawing(context, drawing);
  return new Promise((resolve, reject) =>
    canvas.toBlob(
      (blob) => (blob ? resolve(blob) : reject(new Error("The picture could not be written."))),
      "image/png",
    ),
  );
};

/** light-dark() stays unresolved in a custom property: an element that uses it tells the colour. */
const colourOf = (near: HTMLElement, property: string): string => {
  const probe = document.createElement("span");
  probe.style.color = `var(${property})`;
  near.append(probe);
  const { color } = getComputedStyle(probe);
  probe.remove();
  return color;
};

const paintDrawing = async (context: CanvasRenderingContext2D, drawing: SVGSVGElement): Promise<void> => {
  const box = drawing.getBoundingClientRect();
  if (box.width === 0 || box.height === 0) return;
  const image = await imageOf(standAlone(drawing, box));
  context.drawImage(image, box.left, box.top, box.width, box.height);
  for (const text of drawing.querySelectorAll("text")) paintText(context, text);
};

const standAlone = (drawing: SVGSVGElement, box: DOMRect): string => {
  const copy = drawing.cloneNode(true) as SVGSVGElement;
  const originals = drawing.querySelectorAll("*");
  copy.querySelectorAll("*").forEach((element, index) => {
    const style = getComputedStyle(originals[index]);
    for (const property of copiedProperties) element.setAttribute(property, style.getPropertyValue(property));
    element.removeAttribute("class");
    element.removeAttribute("style");
  });
  copy.querySelectorAll("text").forEach((text) => text.remove());
  copy.setAttribute("xmlns", "http://www.w3.org/2000/svg");
  copy.setAttribute("width", String(box.width));
  copy.setAttribute("height", String(box.height));
  copy.removeAttribute("class");
  copy.removeAttribute("style");
  return new XMLSerializer().serializeToString(copy);
};

const imageOf = async (source: string): Promise<HTMLImageElement> => {
  const address = URL.createObjectURL(new Blob([source], { type: "image/svg+xml" }));
  try {
    const image = new Image();
    image.src = address;
    await image.decode();
    return image;
  } finally {
    URL.revokeObjectURL(address);
  }
};

const alignments: Record<string, CanvasTextAlign> = { middle: "center", end: "right", start: "left" };

const paintText = (context: CanvasRenderingContext2D, text: SVGTextElement): void => {
  const matrix = text.getScreenCTM();
  if (!matrix) return;
  const style = getComputedStyle(text);
  const x = Number(text.getAttribute("x") ?? 0);
  const y = Number(text.getAttribute("y") ?? 0);
  const place = new DOMPoint(x, y).matrixTransform(matrix);
  context.font = `${style.fontWeight} ${style.fontSize} ${style.fontFamily}`;
  context.textAlign = alignments[style.textAnchor] ?? "left";
  context.fillStyle = style.fill;
  context.fillText(text.textContent ?? "", place.x, place.y);
};
