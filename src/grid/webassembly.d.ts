// The few names of WebAssembly that kernel-loader.ts and fft-kernel.ts use: TypeScript keeps them in
// its library for browsers, which this project does not load.
declare namespace WebAssembly {
  class Module {
    constructor(bytes: Uint8Array);
  }
  class Memory {
    constructor(descriptor: { initial: number; maximum: number; shared?: boolean });
    readonly buffer: ArrayBufferLike;
    grow(pages: number): number;
  }
  class Instance {
    constructor(module: Module, imports: { env: { memory: Memory } });
    readonly exports: Record<string, unknown>;
  }
  function validate(bytes: Uint8Array): boolean;
}
