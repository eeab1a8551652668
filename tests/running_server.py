"""Fixtures that start the real server process, each with a database of its own."""

import os
import re
import secrets
import shutil
import signal
import subprocess
import sys
import time
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from urllib.parse import urlsplit, urlunsplit

import psycopg
import pytest
from psycopg import sql

from labbook.accounts.log_ins import kept_log_ins

ROOT = Path(__file__).parents[1]
_START_S = 180
_STOP_S = 15
_WORKER = ("--app", "labbook.celery", "worker", "--pool", "threads", "--concurrency", "2")
_OPEN_AT = re.compile(r"The book is open at (\S+)")


@dataclass
class RunningServer:
    """A server process, its address with a closing slash, its data folder and its log-ins."""

    address: str
    data: Path
    output_file: Path
    environment: Mapping[str, str]
    processes: list[subprocess.Popen]

    @property
    def log_ins(self):
        return kept_log_ins(self.data)

    @property
    def output(self):
        return self.output_file.read_text(encoding="utf-8")

    def manage(self, *words, **options):
        """Run a management command on this server's database; return what it printed."""
        return subprocess.run(
            [sys.executable, "manage.py", *words],
            cwd=ROOT, env=self.environment, check=True, capture_output=True, text=True, **options,
        ).stdout  # fmt: skip

    def ask_to_stop(self):
        for process in self.processes:
            process.send_signal(signal.SIGTERM)

    def stop(self):
        """Ask the processes to end, wait for them, and return the server's exit code."""
        self.ask_to_stop()
        for process in self.processes:
            try:
                process.wait(_STOP_S)
            except subprocess.TimeoutExpired:
                process.kill()
                process.wait()
        return self.processes[0].returncode


def _launch(module, *words, environment, output):
    with output.open("w") as stream:
        return subprocess.Popen(
            [sys.executable, "-m", module, *words],
            cwd=ROOT, env=environment,
            stdin=subprocess.DEVNULL, stdout=stream, stderr=subprocess.STDOUT,
        )  # fmt: skip


def _address_printed(process, output, patience_s=_START_S):
    deadline = time.monotonic() + patience_s
    while time.monotonic() < deadline:
        text = output.read_text(encoding="utf-8")
        if found := _OPEN_AT.search(text):
            return found[1]
        if process.poll() is not None:
            break
        time.sleep(0.05)
    raise AssertionError(f"The server did not come up:\n{output.read_text(encoding='utf-8')}")


class _Databases:
    """Fresh PostgreSQL databases beside the one of the environment; nothing to do for SQLite."""

    def __init__(self, url):
        self._url = url
        self._made = []

    def fresh(self):
        """Return the variables that point a process at a database of its own."""
        if not self._url:
            return {}
        name = f"server_{secrets.token_hex(6)}"
        self._run(sql.SQL("CREATE DATABASE {}").format(sql.Identifier(name)))
        self._made.append(name)
        return {"LABBOOK_DATABASE_URL": urlunsplit(urlsplit(self._url)._replace(path=f"/{name}"))}

    def drop_all(self):
        for name in self._made:
            self._run(sql.SQL("DROP DATABASE {} WITH (FORCE)").format(sql.Identifier(name)))

    def _run(self, statement):
        with psycopg.connect(self._url, autocommit=True) as connection:
            connection.execute(statement)


@pytest.fixture(scope="session")
def start_server(tmp_path_factory):
    """Return a function that starts ``labbook.server`` with the given words and variables.

    In the server mode (a broker in the environment) it starts a Celery worker beside, on a broker
    queue of its own.
    """
    databases = _Databases(os.environ.get("LABBOOK_DATABASE_URL"))
    started = []

    def start(*words, data=None, **variables):
        data = data or tmp_path_factory.mktemp("server")
        logs = tmp_path_factory.mktemp("logs")
        environment = os.environ | databases.fresh() | {"LABBOOK_DATA": str(data)} | variables
        broker = environment.get("LABBOOK_BROKER_URL", "memory://")
        is_embedded = broker.startswith("memory:")
        if not is_embedded:
            environment["LABBOOK_TASK_QUEUE"] = logs.name + secrets.token_hex(4)
        server = _launch("labbook.server", "--port", "0", *words, environment=environment,
                         output=logs / "server")  # fmt: skip
        running = RunningServer("", data, logs / "server", environment, [server])
        started.append(running)
        running.address = _address_printed(server, running.output_file)
        if not is_embedded:
            running.processes.append(
                _launch("celery", *_WORKER, environment=environment, output=logs / "worker")
            )
        return running

    yield start
    for running in started:
        running.ask_to_stop()
    for running in started:
        running.stop()
        shutil.rmtree(running.data, ignore_errors=True)
    databases.drop_all()


@pytest.fixture(scope="session")
def demo_server(start_server):
    """A server with the invented demo and its people; shared, so leave what you find as it is."""
    return start_server()
