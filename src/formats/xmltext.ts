const ENTITIES: Readonly<Record<string, string>> = {
  "&": "&amp;",
  "<": "&lt;",
  ">": "&gt;",
  '"': "&quot;",
  "\t": "&#9;",
  "\n": "&#10;",
  "\r": "&#13;",
};

/** Text that XML can hold: control characters but tabs and line ends become U+FFFD. */
export function xmlText(text: string): string {
  return text.replace(/\p{Cc}/gu, (control) => (control in ENTITIES ? control : "\ufffd"));
}

/** Text as it stands between tags or quotes. */
export function escapedXml(text: string): string {
  return xmlText(text).replace(/[&<>"\t\n\r]/g, (character) => ENTITIES[character] ?? "");
}
