declare module 'http_ece' {
  import type { ECDH } from 'node:crypto'
  export type Parameters = {
    version: 'aes128gcm'
    /** Raw key of RFC 8188. */
    key?: Buffer | string
    keyid?: string
    keymap?: Record<string, Buffer>
    privateKey?: ECDH
    dh?: Buffer | string
    authSecret?: Buffer | string
    salt?: Buffer | string
    rs?: number
    pad?: number
  }
  const ece: {
    encrypt: (plain: Buffer, parameters: Parameters) => Buffer
    decrypt: (body: Buffer, parameters: Parameters) => Buffer
  }
  export default ece
}
