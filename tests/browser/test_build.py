"""The built site: small, self-contained, the same bytes from the same tree."""

from __future__ import annotations

import base64
import hashlib
import http.client
import importlib
import json
import re
import subprocess
import zipfile
from pathlib import Path

import pytest

import bootstrap
import build
import build_notices
import compile_zip

ROOT = Path(__file__).resolve().parents[2]


def _hashes(site):
    return {name: hashlib.sha256((site / name).read_bytes()).hexdigest() for name in build.files(site)}


def test_own_files_are_small(site):
    """All files of ours together stay under 400 kB, each counted as gzip -9."""
    sizes = build.own_bytes(site)
    assert any(name.endswith(".whl") for name in sizes)
    assert sum(sizes.values()) < 400_000, sorted(sizes.items(), key=lambda row: -row[1])


def test_nothing_is_compiled_on_the_phone(site):
    """Standard library and core hold .pyc files only, and each says that its source is not to be looked for."""
    for archive in (site / "pyodide" / "python_stdlib.zip", next(site.glob("pyodide/*.whl"))):
        with zipfile.ZipFile(archive) as opened:
            modules = [name for name in opened.namelist() if ".py" in name]
            assert modules
            assert all(name.endswith(".pyc") for name in modules)
            # PEP 552: bytes 4 to 8 of a .pyc are flags; 1 is "by hash", 2 would be "check the source".
            assert {int.from_bytes(opened.read(name)[4:8], "little") for name in modules} == {1}


def test_compiling_a_wheel(tmp_path, monkeypatch):
    """A compiled wheel imports without its sources, its RECORD holds for the new files, and the same wheel gives the same bytes."""
    plain, made, again = (tmp_path / name for name in ("plain.whl", "made.whl", "again.whl"))
    with zipfile.ZipFile(plain, "w") as archive:
        archive.writestr("compiled_example.py", '"""Words."""\nANSWER = 6 * 7\n')
        archive.writestr("compiled_example-1.dist-info/RECORD", "compiled_example.py,,\n")
    for target in (made, again):
        compile_zip.compile_zip(str(plain), str(target), "shown")
    assert made.read_bytes() == again.read_bytes()
    monkeypatch.syspath_prepend(str(made))
    module = importlib.import_module("compiled_example")
    assert (module.ANSWER, module.__doc__) == (42, None)
    with zipfile.ZipFile(made) as archive:
        body = archive.read("compiled_example.pyc")
        # Python packaging's specification of RECORD: name, urlsafe base64 of the hash without padding, size.
        digest = base64.urlsafe_b64encode(hashlib.sha256(body).digest()).decode().rstrip("=")
        record = archive.read("compiled_example-1.dist-info/RECORD").decode()
    assert f"compiled_example.pyc,sha256={digest},{len(body)}\n" in record


def test_lock_names_our_wheel_alone(site):
    """The frozen lock lists the core and nothing else, by file name and by the hash of the file beside it."""
    lock = json.loads((site / "pyodide" / "pyodide-lock.json").read_text(encoding="utf-8"))
    assert list(lock["packages"]) == ["strayline"]
    entry = lock["packages"]["strayline"]
    assert entry["sha256"] == hashlib.sha256((site / "pyodide" / entry["file_name"]).read_bytes()).hexdigest()


def test_precache_lists_every_file(site):
    """The service worker's list holds every file of the site but the service worker's own scripts, with size and hash."""
    text = (site / "precache.js").read_text(encoding="utf-8")
    rows = [json.loads(line.strip().rstrip(",")) for line in text.splitlines() if line.startswith("  [")]
    scripts = {path.name for path in (ROOT / "service_worker").glob("*.js")} | {"precache.js"}
    assert {path for path, _, _ in rows} == set(build.files(site)) - scripts
    for path, sha256, size in rows:
        body = (site / path).read_bytes()
        assert (sha256, size) == (hashlib.sha256(body).hexdigest(), len(body))


def test_page_shows_version_and_build(site):
    """The page shows the core's version and the build id of the service worker's list."""
    identity = re.search(r'BUILD = "([0-9a-f]{12})"', (site / "precache.js").read_text(encoding="utf-8"))[1]
    page = (site / "index.html").read_text(encoding="utf-8")
    assert identity in page
    version = re.search(r'__version__ = "([^"]+)"', (ROOT / "core/strayline/__init__.py").read_text(encoding="utf-8"))[1]
    assert version in page
    assert "build:" not in page
    assert "{{" not in page


def test_notices_have_their_texts(site):
    """Every bundled part is named with its licence, and every licence text that the notices link to is there."""
    page = (site / "notices.html").read_text(encoding="utf-8")
    for part in build_notices.parts(bootstrap.node_tools(ROOT / "webui") / "node_modules"):
        assert part.name in page
        if part.text:
            assert f"licences/{part.text}.txt" in page
    for name in re.findall(r'href="(licences/[^"]+)"', page):
        assert len((site / name).read_text(encoding="utf-8")) > 500
    assert "Mozilla Public License Version 2.0" in (site / "licences/mpl-2.0.txt").read_text(encoding="utf-8")


def test_files_are_served_as_what_they_are(server):
    """Each file comes with its type and the policy; a folder is not listed, and nothing outside the site is served."""
    connection = http.client.HTTPConnection("127.0.0.1", server.port)
    expected = {
        "/": "text/html; charset=utf-8",
        "/boot.js": "text/javascript; charset=utf-8",
        "/pyodide/pyodide.mjs": "text/javascript; charset=utf-8",
        "/pyodide/pyodide.asm.wasm": "application/wasm",
        "/manifest.webmanifest": "application/manifest+json",
        "/icons/icon.svg": "image/svg+xml",
    }
    for path, kind in expected.items():
        connection.request("GET", path)
        answer = connection.getresponse()
        answer.read()
        assert (answer.status, answer.getheader("Content-Type")) == (200, kind)
        assert "default-src 'none'" in answer.getheader("Content-Security-Policy")
        assert answer.getheader("X-Content-Type-Options") == "nosniff"
    for path in ("/icons/", "/../site.stamp", "/%2e%2e/site.stamp"):
        connection.request("GET", path)
        answer = connection.getresponse()
        answer.read()
        assert answer.status == 404
    connection.close()


def test_site_names_no_other_host(site):
    """No page, script or style of ours loads anything from another host; only the notices link to their parts' sources."""
    for name in build.files(site):
        if name.endswith((".html", ".css", ".js", ".webmanifest")) and name != "page/vendor/idb.js":
            text = (site / name).read_text(encoding="utf-8")
            loads = re.findall(r"""(?:src|href)="(https?:[^"]+)"[^>]*>|url\((["']?https?:[^)]+)\)|import\(?\s*["'](https?:[^"']+)""", text)
            assert name == "notices.html" or loads == [], (name, loads)


def test_locks_name_no_registry():
    """No tracked lock or setting names a package registry: whoever builds takes the packages from where they always do."""
    tracked = subprocess.run(["git", "ls-files"], cwd=ROOT, check=True, capture_output=True, text=True).stdout.split()
    locks = [name for name in tracked if name.endswith((".lock", "package-lock.json", "package.json"))]
    assert len(locks) >= 6
    for name in locks:
        text = (ROOT / name).read_text(encoding="utf-8")
        assert '"resolved"' not in text
        assert "index-url" not in text


@pytest.mark.full
def test_same_tree_same_bytes(tmp_path, monkeypatch):
    """Two builds of one tree, one of them compiling the standard library anew, give the same files."""
    once = build.build(tmp_path / "once")
    monkeypatch.setattr(build, "KEPT", tmp_path / "kept")
    assert _hashes(build.build(tmp_path / "again")) == _hashes(once)
