/**
 * The few names that the rooms below `run` take from every JavaScript platform, Node and browser
 * alike. Anything not listed here (console, document, clocks, files) is a compile error there.
 */
declare namespace WebAssembly {
  interface MemoryDescriptor {
    initial: number;
    maximum?: number;
  }
  class Memory {
    constructor(descriptor: MemoryDescriptor);
    readonly buffer: ArrayBuffer;
    grow(pages: number): number;
  }
  class Module {
    constructor(bytes: Uint8Array<ArrayBuffer>);
  }
  class Instance {
    constructor(module: Module, imports?: Record<string, Record<string, unknown>>);
    readonly exports: Record<string, unknown>;
  }
}

declare function atob(text: string): string;

declare class TextDecoder {
  constructor(label?: string, options?: { fatal?: boolean; ignoreBOM?: boolean });
  decode(input?: ArrayBufferView, options?: { stream?: boolean }): string;
}

declare class TextEncoder {
  encode(text: string): Uint8Array<ArrayBuffer>;
}
