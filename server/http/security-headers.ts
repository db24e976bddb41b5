import type { HelmetOptions } from "helmet";
import type { Environment } from "../environment";

/** Headers for every answer: scripts, styles, fonts and calls from our own origin only, and no framing. */
export function securityHeaders(environment: Environment): HelmetOptions {
  return {
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        "default-src": ["'self'"],
        "base-uri": ["'none'"],
        "connect-src": ["'self'"],
        "font-src": ["'self'"],
        "form-action": ["'self'"],
        "frame-ancestors": ["'none'"],
        // Charts are saved as pictures by way of blob: addresses.
        "img-src": ["'self'", "data:", "blob:"],
        "object-src": ["'none'"],
        "script-src": ["'self'"],
        "style-src": ["'self'"],
        "worker-src": ["'self'"],
      },
    },
    xFrameOptions: { action: "deny" },
    // Over plain http on loopback this would make browsers refuse the page.
    strictTransportSecurity: environment.SECURE_COOKIES ? { maxAge: 31_536_000 } : false,
    referrerPolicy: { policy: "same-origin" },
  };
}
