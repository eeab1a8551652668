"""Generated passwords and the file that keeps them."""

import stat

from labbook.accounts.log_ins import generated_password, keep_log_ins, kept_log_ins


def test_generated_passwords_differ_and_avoid_look_alikes():
    passwords = {generated_password() for _ in range(200)}
    assert len(passwords) == 200
    assert not set("".join(passwords)) & set("01ilo")


def test_log_ins_are_kept_beside_earlier_ones_for_the_owner_only(tmp_path):
    keep_log_ins(tmp_path, {"chemist": "aaaa-bbbb"})
    path = keep_log_ins(tmp_path, {"guest": "cccc-dddd"})
    assert kept_log_ins(tmp_path) == {"chemist": "aaaa-bbbb", "guest": "cccc-dddd"}
    assert stat.S_IMODE(path.stat().st_mode) == 0o600


def test_a_file_left_open_to_others_is_closed_to_them(tmp_path):
    path = tmp_path / "log-ins"
    path.touch(mode=0o644)
    keep_log_ins(tmp_path, {"chemist": "aaaa-bbbb"})
    assert stat.S_IMODE(path.stat().st_mode) == 0o600


def test_nothing_kept_is_no_error(tmp_path):
    assert kept_log_ins(tmp_path) == {}
