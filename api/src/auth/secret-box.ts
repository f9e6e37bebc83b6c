import { createCipheriv, createDecipheriv, randomBytes } from 'node:crypto';

const NONCE = 12;
const TAG = 16;

export interface Sealed {
  keyId: string;
  secret: Buffer;
}

/**
 * Encrypts small secrets for the database (AES-256-GCM). The ring is "id:key" by commas, keys as 32 bytes in base64url: the first one
 * encrypts, all of them decrypt, so that a new one can be put in front before an old one goes. Each text is bound to whose it is.
 */
export class SecretBox {
  private readonly keys: ReadonlyMap<string, Buffer>;
  readonly currentKeyId: string;

  constructor(ring: string) {
    const entries = ring.split(',').map((entry) => entry.split(':', 2)).map(([id = '', key = '']) => [id, Buffer.from(key, 'base64url')] as const);
    this.keys = new Map(entries);
    this.currentKeyId = entries[0]?.[0] ?? '';
  }

  seal(plain: Uint8Array, owner: string): Sealed {
    const nonce = randomBytes(NONCE);
    const cipher = createCipheriv('aes-256-gcm', this.key(this.currentKeyId), nonce).setAAD(Buffer.from(owner));
    const text = Buffer.concat([cipher.update(plain), cipher.final()]);
    return { keyId: this.currentKeyId, secret: Buffer.concat([nonce, cipher.getAuthTag(), text]) };
  }

  /** Throws where the text was changed, belongs to somebody else, or its key is gone. */
  open({ keyId, secret }: Sealed, owner: string): Buffer {
    const decipher = createDecipheriv('aes-256-gcm', this.key(keyId), secret.subarray(0, NONCE), { authTagLength: TAG });
    decipher.setAAD(Buffer.from(owner)).setAuthTag(secret.subarray(NONCE, NONCE + TAG));
    return Buffer.concat([decipher.update(secret.subarray(NONCE + TAG)), decipher.final()]);
  }

  private key(id: string): Buffer {
    const key = this.keys.get(id);
    if (!key) throw new Error(`SECOND_FACTOR_KEYS has no key "${id}" any more.`);
    return key;
  }
}
