/** The one runtime class that every host has and the ES library lacks (WHATWG Encoding). */
declare class TextDecoder {
  constructor(label?: string, options?: { fatal?: boolean; ignoreBOM?: boolean });
  decode(input?: Uint8Array): string;
}
