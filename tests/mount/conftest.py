"""A wheel of the app, mounted in a site that ``startproject`` has just made."""

import json
import os
import re
import socket
import subprocess
import sys
import time
import urllib.error
import urllib.parse
import urllib.request
from dataclasses import dataclass
from http.cookiejar import CookieJar
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
NAME, PASSWORD = "owner", "violet-crystals-91"
_CSRF_FIELD = re.compile(r'name="csrfmiddlewaretoken" value="([^"]+)"')
_PYTHON_BLOCK = re.compile(r"^```python\n(.*?)^```$", re.MULTILINE | re.DOTALL)


def _lines_to_write():
    """Return what README tells a site to add to its settings and to its addresses."""
    readme = (ROOT / "README.md").read_text(encoding="utf-8")
    chapter = readme.partition("## Mount it in another site")[2].partition("\n## ")[0]
    settings, addresses = _PYTHON_BLOCK.findall(chapter)
    return settings, addresses


def _run(*words, **options):
    done = subprocess.run(
        [str(word) for word in words], capture_output=True, text=True, check=False, **options
    )
    assert done.returncode == 0, f"{words}\n{done.stdout}\n{done.stderr}"
    return done.stdout


@pytest.fixture(scope="session")
def wheel(tmp_path_factory):
    """A wheel built from this repository."""
    folder = tmp_path_factory.mktemp("wheel")
    _run(sys.executable, "-m", "build", "--wheel", "--no-isolation", "--outdir", folder, ROOT)
    (path,) = folder.glob("*.whl")
    return path


@pytest.fixture(scope="session")
def clean_python(wheel, tmp_path_factory):
    """The Python of a virtual environment that holds the wheel and what the lock names."""
    folder = tmp_path_factory.mktemp("clean")
    uv = Path(sys.executable).with_name("uv")
    _run(uv, "venv", "--quiet", "--python", sys.executable, folder / "venv")
    python = folder / "venv/bin/python"
    install = [uv, "pip", "install", "--quiet", "--no-deps", "--python", python]
    _run(*install, "--require-hashes", "--requirement", ROOT / "requirements.lock")
    _run(*install, wheel)
    return python


class Browserless:
    """Plain HTTP with cookies, as a script of the lab's would speak it."""

    def __init__(self, address):
        self.address = address
        self._cookies = CookieJar()
        self._opener = urllib.request.build_opener(
            urllib.request.HTTPCookieProcessor(self._cookies)
        )

    def get(self, path):
        """Return the final address and the text."""
        return self._open(urllib.request.Request(urllib.parse.urljoin(self.address, path)))

    def post(self, path, fields):
        """Send a form as a browser would, with the token that its page carries."""
        _, page = self.get(path)
        token = _CSRF_FIELD.search(page)[1]
        body = urllib.parse.urlencode({**fields, "csrfmiddlewaretoken": token}).encode()
        address = urllib.parse.urljoin(self.address, path)
        return self._open(urllib.request.Request(address, body, {"Referer": address}))

    def send(self, method, path, content):
        """Send JSON as a script in the page would; return the JSON of the answer."""
        token = next(cookie.value for cookie in self._cookies if cookie.name == "csrftoken")
        request = urllib.request.Request(
            urllib.parse.urljoin(self.address, path),
            json.dumps(content).encode(),
            {"Content-Type": "application/json", "X-CSRFToken": token},
            method=method,
        )
        return json.loads(self._open(request)[1])

    def _open(self, request):
        try:
            with self._opener.open(request, timeout=30) as answer:
                return answer.url, answer.read().decode()
        except urllib.error.HTTPError as error:
            text = error.read().decode(errors="replace")
            raise AssertionError(f"{request.full_url}: {error.code}\n{text[:4000]}") from error


@dataclass(frozen=True)
class MountedSite:
    """A foreign site's folder, its Python, and the address its server listens on."""

    folder: Path
    python: Path
    address: str

    def manage(self, *words):
        return _manage(self.python, self.folder, *words)


def _environment():
    """The machine's environment without anything of this repository's site."""
    return {
        name: value
        for name, value in os.environ.items()
        if not name.startswith(("LABBOOK_", "DJANGO_", "PYTEST_", "COV_", "PYTHON"))
    }


def _manage(python, folder, *words, **variables):
    return _run(python, "manage.py", *words, cwd=folder, env=_environment() | variables)


def _free_port():
    with socket.socket() as probe:
        probe.bind(("127.0.0.1", 0))
        return probe.getsockname()[1]


def _wait_for(address, process, output):
    deadline = time.monotonic() + 60
    while time.monotonic() < deadline and process.poll() is None:
        try:
            urllib.request.urlopen(address, timeout=30).close()
        except urllib.error.HTTPError:
            return
        except urllib.error.URLError:
            time.sleep(0.1)
        else:
            return
    raise AssertionError(output.read_text(encoding="utf-8"))


@pytest.fixture(scope="session")
def mounted_site(clean_python, tmp_path_factory):
    """A fresh site with the app mounted by two settings lines and one address line, served."""
    folder = tmp_path_factory.mktemp("site")
    _run(clean_python, "-m", "django", "startproject", "fresh", folder, env=_environment())
    settings, addresses = _lines_to_write()
    assert (settings.count("\n"), addresses.count("\n")) == (2, 1)
    with (folder / "fresh/settings.py").open("a") as file:
        file.write(settings)
    with (folder / "fresh/urls.py").open("a") as file:
        file.write(f"from django.urls import include\n{addresses}")
    _manage(clean_python, folder, "migrate")
    _manage(
        clean_python, folder, "createsuperuser", "--noinput",
        "--username", NAME, "--email", "owner@example.org",
        DJANGO_SUPERUSER_PASSWORD=PASSWORD,
    )  # fmt: skip
    port = _free_port()
    output = folder / "output"
    with output.open("w") as stream:
        server = subprocess.Popen(
            [clean_python, "manage.py", "runserver", "--noreload", f"127.0.0.1:{port}"],
            cwd=folder, env=_environment(),
            stdin=subprocess.DEVNULL, stdout=stream, stderr=subprocess.STDOUT,
        )  # fmt: skip
    try:
        address = f"http://127.0.0.1:{port}/"
        _wait_for(f"{address}lab/", server, output)
        yield MountedSite(folder, clean_python, address)
    finally:
        server.terminate()
        server.wait(15)


@pytest.fixture
def visitor(mounted_site):
    return Browserless(mounted_site.address)


@pytest.fixture
def owner(visitor):
    """The site's superuser, logged in over HTTP."""
    address, _ = visitor.get("lab/")
    arrived, page = visitor.post(address, {"username": NAME, "password": PASSWORD})
    assert arrived == f"{visitor.address}lab/", page[:2000]
    return visitor
