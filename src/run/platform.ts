/** What a run ran on, as the run record says it: `Node 20.20.2, linux x64`. */
export function platformText(): string {
  return `Node ${process.versions.node}, ${process.platform} ${process.arch}`;
}
