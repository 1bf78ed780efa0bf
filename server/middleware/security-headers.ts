import type { RequestHandler } from 'express';
import helmet from 'helmet';

/** Trusted Types policies the client and its editor make. */
const POLICIES = [
  'default',
  'angular',
  'angular#bundler',
  'dompurify',
  'defaultWorkerFactory',
  'editorViewLayer',
  'richScreenReaderContent',
  'domLineBreaksComputer',
  'diffReview',
  'diffEditorWidget',
  'editorGhostText',
  'stickyScrollViewLayer',
  'standaloneColorizer',
  'tokenizeToString',
  'lw-worker',
  "'allow-duplicates'",
];

/** Everything from our own origin, no script written into a page, no framing. Styles may stand in a page: the editor needs it. */
export function securityHeaders(isHttps: boolean): RequestHandler {
  return helmet({
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        'default-src': ["'none'"],
        'base-uri': ["'self'"],
        'form-action': ["'self'"],
        'frame-ancestors': ["'none'"],
        'object-src': ["'none'"],
        'script-src': ["'self'"],
        'style-src': ["'self'", "'unsafe-inline'"],
        'font-src': ["'self'", 'data:'],
        'img-src': ["'self'", 'data:'],
        'connect-src': ["'self'"],
        'worker-src': ["'self'"],
        'manifest-src': ["'self'"],
        'require-trusted-types-for': ["'script'"],
        'trusted-types': POLICIES,
      },
    },
    crossOriginEmbedderPolicy: { policy: 'require-corp' },
    crossOriginOpenerPolicy: { policy: 'same-origin' },
    crossOriginResourcePolicy: { policy: 'same-origin' },
    // A plain-http address that once said so would be locked out of its browsers.
    strictTransportSecurity: isHttps ? { maxAge: 31_536_000 } : false,
  });
}
