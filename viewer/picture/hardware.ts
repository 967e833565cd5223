/**
 * Whether real graphics hardware stands behind WebGL. In software it takes 30 to 50 times as long a
 * frame as a plain canvas.
 */
export function hasHardwareWebgl(): boolean {
  const canvas = document.createElement("canvas");
  const gl = canvas.getContext("webgl2", { failIfMajorPerformanceCaveat: true });
  if (gl === null) return false;
  const info = gl.getExtension("WEBGL_debug_renderer_info");
  const name = String(gl.getParameter(info?.UNMASKED_RENDERER_WEBGL ?? gl.RENDERER));
  gl.getExtension("WEBGL_lose_context")?.loseContext();
  return !/swiftshader|llvmpipe|softpipe|software|basic render/i.test(name);
}
