import type { Session } from "../page/session.js";

/** Takes files that are dropped anywhere on the page; marks the root while one hovers. */
export function acceptDrops(root: HTMLElement, session: Session): void {
  const carriesFile = (event: DragEvent): boolean =>
    event.dataTransfer?.types.includes("Files") === true;
  document.addEventListener("dragover", (event) => {
    if (!carriesFile(event)) return;
    event.preventDefault();
    root.classList.add("receiving");
  });
  document.addEventListener("dragleave", (event) => {
    if (event.relatedTarget === null) root.classList.remove("receiving");
  });
  document.addEventListener("drop", (event) => {
    root.classList.remove("receiving");
    const file = event.dataTransfer?.files[0];
    if (file === undefined) return;
    event.preventDefault();
    session.openFile(file);
  });
}
