"""The server process of the embedded mode: ``python -m labbook.server``.

It prepares the book, says where it is and how to log in, and serves it with waitress; tasks run on
threads beside. The port is taken before anything is changed on disk, so that a second start by
mistake does no harm.
"""

from __future__ import annotations

import argparse
import fcntl
import os
import signal
import socket
import sys
from collections.abc import Mapping
from pathlib import Path
from typing import NoReturn

_THREADS = 8
_EVERY_ADDRESS = {"0.0.0.0", "::"}  # noqa: S104 - compared with, not listened on
_PATIENCE_S = 10.0


def _arguments(words: list[str] | None) -> argparse.Namespace:
    parser = argparse.ArgumentParser(
        prog="deploy/serve", description="Serve the reaction book from this machine."
    )
    parser.add_argument("--host", default="127.0.0.1", help="address to listen on (%(default)s)")
    parser.add_argument("--port", type=int, default=8000, help="port to listen on (%(default)s)")
    parser.add_argument(
        "--data",
        type=Path,
        metavar="FOLDER",
        help="folder of the database, files and log-ins (LABBOOK_DATA, else .data)",
    )
    parser.add_argument(
        "--empty",
        action="store_true",
        help="start a new book empty and make its first account, instead of loading the demo",
    )
    parser.add_argument("--account", metavar="NAME", help="user name of that first account")
    return parser.parse_args(words)


def _set_environment(arguments: argparse.Namespace) -> None:
    """Hand the options to the settings, which read the environment."""
    os.environ.setdefault("DJANGO_SETTINGS_MODULE", "labbook.settings")
    if arguments.data:
        os.environ["LABBOOK_DATA"] = str(arguments.data.absolute())
    names = ["localhost", "127.0.0.1", "[::1]"]
    if arguments.host in _EVERY_ADDRESS:
        names += [socket.gethostname(), socket.getfqdn()]
    elif arguments.host not in names:
        names.append(arguments.host)
    os.environ.setdefault("LABBOOK_HOSTS", ",".join(dict.fromkeys(names)))


def _listen(host: str, port: int) -> socket.socket:
    """Return a listening socket; browsers that come early wait in its queue."""
    family = socket.AF_INET6 if ":" in host else socket.AF_INET
    listener = socket.socket(family, socket.SOCK_STREAM)
    listener.setsockopt(socket.SOL_SOCKET, socket.SO_REUSEADDR, 1)
    try:
        listener.bind((host, port))
    except OSError as error:
        sys.exit(f"Cannot listen on {host} port {port}: {error.strerror}. Choose another --port.")
    listener.listen(1024)
    return listener


def _be_alone_with(folder: Path) -> None:
    """Refuse to be a second process on the same embedded book, whose tasks would go astray."""
    handle = os.open(folder / "serving", os.O_RDWR | os.O_CREAT, 0o600)
    try:
        fcntl.flock(handle, fcntl.LOCK_EX | fcntl.LOCK_NB)
    except BlockingIOError:
        sys.exit(
            f"Another server is serving the book in {folder}. Stop it, or choose other --data."
        )
    # The lock lasts as long as the file stays open: until this process ends.


def _address(listener: socket.socket) -> str:
    host, port = listener.getsockname()[:2]
    if host in _EVERY_ADDRESS:
        host = socket.gethostname()
    return f"http://[{host}]:{port}/" if ":" in host else f"http://{host}:{port}/"


def _announce(address: str, passwords: Mapping[str, str], kept_in: Path) -> None:
    print(f"\nThe book is open at {address}", flush=True)
    if passwords:
        print("Log-ins, shown this once:")
        for name, password in passwords.items():
            print(f"  {name:<10} {password}")
    if kept_in.exists():
        print(f"Log-ins are kept in {kept_in}, readable by its owner only.")
    print("Stop with Ctrl+C.", flush=True)


def _stop_on_signal(number: int, frame: object) -> NoReturn:
    raise SystemExit(0)


def _serve(listener: socket.socket) -> bool:
    """Serve until told to stop; tell whether every running task could finish."""
    import waitress

    from labbook.celery import application as celery_application
    from labbook.embedded_worker import EmbeddedWorker, is_embedded
    from labbook.wsgi import application
    from reactions.tasks import take_up_interrupted_imports

    server = waitress.create_server(
        application, sockets=[listener], threads=_THREADS, ident="labbook"
    )
    worker = EmbeddedWorker(celery_application) if is_embedded() else None
    if worker:
        worker.start()
        take_up_interrupted_imports()
    try:
        server.run()
    finally:
        server.close()
    return worker.stop(_PATIENCE_S) if worker else True


def main(words: list[str] | None = None) -> None:
    """Prepare the book and serve it until SIGTERM or Ctrl+C."""
    arguments = _arguments(words)
    _set_environment(arguments)
    # The database, too, is for its owner's eyes only.
    os.umask(0o077)
    signal.signal(signal.SIGTERM, _stop_on_signal)
    listener = _listen(arguments.host, arguments.port)

    import django
    from django.core.exceptions import ValidationError

    django.setup()
    from django.conf import settings

    from labbook.accounts.log_ins import FILE_NAME
    from labbook.embedded_worker import is_embedded
    from labbook.first_start import prepare_book

    if is_embedded():
        _be_alone_with(settings.DATA_DIR)
    try:
        start = prepare_book(is_empty=arguments.empty, account=arguments.account)
    except ValidationError as error:
        sys.exit("The first account was not made. " + " ".join(error.messages))
    except KeyboardInterrupt:
        sys.exit("\nStopped before the book was ready.")
    _announce(_address(listener), start.passwords, settings.DATA_DIR / FILE_NAME)
    if not _serve(listener):
        print("A task was still running and is cut off; what it had begun is undone.")
        sys.stdout.flush()
        # The interpreter would wait for the task's thread without end.
        os._exit(1)


if __name__ == "__main__":
    main()
