import { accept, refuse, type Result } from '../../shared/model/frame.ts';

const utf8 = new TextDecoder('utf-8', { fatal: true });

/** Bytes to plain values: JSON (RFC 8259) in UTF-8. */
export const readJson = (bytes: Uint8Array): Result<unknown> => {
  try {
    return accept(JSON.parse(utf8.decode(bytes)));
  } catch (error) {
    const came = error instanceof Error ? error.message.slice(0, 80) : 'something else';
    return refuse('json', '(message)', 'JSON (RFC 8259) in UTF-8', came);
  }
};
