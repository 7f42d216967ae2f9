/** The part that is used here of the WebAssembly build of OpenJPEG, which comes without types. */
declare module '@cornerstonejs/codec-openjpeg/decodewasmjs' {
  export interface Decoder {
    getEncodedBuffer(length: number): Uint8Array
    decode(): void
    getDecodedBuffer(): Uint8Array
    getFrameInfo(): {
      width: number
      height: number
      bitsPerSample: number
      componentCount: number
      isSigned: boolean
    }
    delete(): void
  }
  export interface OpenJpeg {
    J2KDecoder: new () => Decoder
    HEAPU8: Uint8Array
  }
  function openJpeg(options: {
    print: (line: string) => void
    printErr: (line: string) => void
  }): Promise<OpenJpeg>
  export { openJpeg as default }
}
