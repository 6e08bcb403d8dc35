"""The content security policy: the strictest under which Pyodide starts. Nothing may come from, or go to, another origin."""

from __future__ import annotations

_DIRECTIVES = {
    "default-src": "'none'",
    "script-src": "'self' 'wasm-unsafe-eval'",
    "worker-src": "'self'",
    "connect-src": "'self'",
    "style-src": "'self'",
    "img-src": "'self'",
    "manifest-src": "'self'",
    "base-uri": "'none'",
    "form-action": "'none'",
    "object-src": "'none'",
    "require-trusted-types-for": "'script'",
    "trusted-types": "app",
}

# What a page says of itself, for hosting that sets no headers.
META = "; ".join(f"{name} {value}" for name, value in _DIRECTIVES.items())
# What our own server says of every file; browsers heed frame-ancestors only here.
HEADER = f"{META}; frame-ancestors 'none'"
