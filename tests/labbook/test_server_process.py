"""The server process: first start, second start, stop."""

import stat
import urllib.request

import pytest


def answer(server, path):
    with urllib.request.urlopen(server.address + path, timeout=10) as response:
        return response.status, response.read().decode()


@pytest.fixture(scope="module")
def empty_book(start_server, tmp_path_factory):
    folder = tmp_path_factory.mktemp("book") / "made-on-first-start"
    return start_server("--empty", data=folder, LABBOOK_BROKER_URL="memory://")


def test_the_health_address_answers_without_a_log_in(demo_server):
    assert answer(demo_server, "health/") == (200, '{"status": "ok"}')


def test_the_demo_starts_with_its_three_people(demo_server):
    assert set(demo_server.log_ins) == {"chemist", "reviewer", "guest"}
    assert len(set(demo_server.log_ins.values())) == 3


def test_it_ends_in_good_order_and_its_passwords_are_printed_once_and_kept_for_the_owner_only(
    start_server, tmp_path
):
    first = start_server("--empty", data=tmp_path)
    assert first.log_ins["owner"] in first.output
    assert stat.S_IMODE((tmp_path / "log-ins").stat().st_mode) == 0o600
    assert first.stop() == 0
    second = start_server(data=tmp_path, **database_of(first))
    assert first.log_ins == second.log_ins
    assert second.log_ins["owner"] not in second.output
    assert str(tmp_path / "log-ins") in second.output


def database_of(server):
    """The variables that point a second start at the same database."""
    url = server.environment.get("LABBOOK_DATABASE_URL")
    return {"LABBOOK_DATABASE_URL": url} if url else {}


def test_the_database_and_its_folder_are_for_the_owner_only(empty_book):
    assert stat.S_IMODE(empty_book.data.stat().st_mode) == 0o700
    for path in empty_book.data.glob("labbook.sqlite3*"):
        assert stat.S_IMODE(path.stat().st_mode) == 0o600


def test_the_first_account_takes_its_name_and_password_from_the_environment(start_server, tmp_path):
    server = start_server(
        "--empty",
        data=tmp_path,
        LABBOOK_FIRST_ACCOUNT="larkfen",
        LABBOOK_FIRST_PASSWORD="violet-crystals-91",
    )
    assert server.log_ins == {}
    checked = server.manage(
        "shell", "--no-imports", "--command",
        "from django.contrib.auth import authenticate;"
        "print(authenticate(username='larkfen', password='violet-crystals-91').is_superuser)",
    )  # fmt: skip
    assert checked.strip().endswith("True")


def test_a_weak_first_password_is_refused_with_the_reason(start_server):
    with pytest.raises(AssertionError, match="too short"):
        start_server("--empty", LABBOOK_FIRST_PASSWORD="short")


def test_a_port_in_use_is_said_before_anything_is_written(start_server, empty_book, tmp_path):
    port = empty_book.address.rstrip("/").rpartition(":")[2]
    with pytest.raises(AssertionError, match="Choose another --port"):
        start_server("--port", port, data=tmp_path / "second")
    assert not (tmp_path / "second").exists()


def test_a_second_server_on_the_same_embedded_book_is_refused(start_server, empty_book):
    with pytest.raises(AssertionError, match="Another server is serving the book"):
        start_server("--empty", data=empty_book.data, LABBOOK_BROKER_URL="memory://")
