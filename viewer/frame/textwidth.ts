let context: CanvasRenderingContext2D | null | undefined;

/** The width of a text in CSS pixels, in a font as CSS writes it. */
export function textWidth(text: string, font: string): number {
  context ??= document.createElement("canvas").getContext("2d");
  if (context === null) return text.length * 7;
  context.font = font;
  return context.measureText(text).width;
}

/** The text, cut short with an ellipsis where it is wider than there is room. */
export function fitted(text: string, font: string, room: number): string {
  if (textWidth(text, font) <= room) return text;
  let length = text.length;
  while (length > 1 && textWidth(`${text.slice(0, length)}…`, font) > room) length--;
  return `${text.slice(0, length).trimEnd()}…`;
}
