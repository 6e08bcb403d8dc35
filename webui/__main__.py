"""`python3 webui` builds the site and serves it on this machine; `python3 webui build` only builds it and prints where it is."""

from __future__ import annotations

import argparse
import sys
from pathlib import Path

HERE = Path(__file__).resolve().parent
sys.path.insert(0, str(HERE.parent / "core"))

if sys.version_info < (3, 11):  # noqa: UP036  (said in a sentence instead of a traceback)
    sys.exit("Strayline needs Python 3.11 or newer.")

import bootstrap  # noqa: E402  (core/ joins the path above)
import build  # noqa: E402
import serve  # noqa: E402


def main() -> int:
    """Run the command line and return the exit status."""
    parser = argparse.ArgumentParser(prog="python3 webui", description=__doc__)
    parser.add_argument("command", nargs="?", choices=["build", "serve"], default="serve", help="build only, or build and serve (default)")
    parser.add_argument("--port", type=int, help=f"port on {serve.HOST}; 0 for any free one (default: {serve.PORT} or the next free one)")
    given = parser.parse_args()
    try:
        site = build.build()
    except (build.BuildError, bootstrap.MissingToolError) as error:
        print(error, file=sys.stderr)
        return 1
    own = sum(build.own_bytes(site).values())
    print(f"own files: {own / 1000:.0f} kB of {build.OWN_LIMIT_BYTES / 1000:.0f} kB (gzip -9 per file)")
    if given.command == "build":
        print(site)
        return 0
    return _serve(site, given.port)


def _serve(site: Path, port: int | None) -> int:
    try:
        server = serve.server(site, port)
    except OSError as error:
        print(f"Port {port} cannot be had ({error.strerror}); choose another with --port.", file=sys.stderr)
        return 1
    with server:
        print(f"http://{serve.HOST}:{server.server_port}/", flush=True)
        try:
            server.serve_forever()
        except KeyboardInterrupt:
            print()
    return 0


if __name__ == "__main__":
    sys.exit(main())
