import { createHash } from 'node:crypto';
import type { Plugin } from 'vite';

const LENGTH = 16;

/**
 * Names a build by its content: in the page as a meta tag, and in build-id.txt for the server, which repeats it in each answer. The
 * same source gives the same id, so that a server that was only restarted asks nobody to load the page again.
 */
export function buildId(): Plugin {
  let id = '';
  return {
    name: 'build-id',
    apply: 'build',
    enforce: 'post',
    transformIndexHtml: {
      order: 'post',
      handler: (_html, { bundle }) => {
        // the names of files carry a hash of their content
        id = createHash('sha256').update(Object.keys(bundle ?? {}).sort().join('\n')).digest('hex').slice(0, LENGTH);
        return [{ tag: 'meta', attrs: { name: 'build-id', content: id }, injectTo: 'head' }];
      },
    },
    generateBundle: {
      order: 'post',
      handler() {
        this.emitFile({ type: 'asset', fileName: 'build-id.txt', source: id });
      },
    },
  };
}
