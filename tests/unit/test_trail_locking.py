"""One writer at a time; who has the survey open is told."""

import os
import threading
import time
from pathlib import Path

import pytest

from roughness.errors import BusyError, RecordError
from roughness.trail.locking import LOCK_FILE, SurveyLock
from roughness.trail.presence import Present

AT = "2026-06-03T18:20:00+02:00"


def test_the_second_waits_and_is_told_who_holds_it(tmp_path: Path) -> None:
    with SurveyLock(tmp_path).held("Ann", AT):
        started = time.monotonic()
        with (
            pytest.raises(BusyError, match=rf"busy: Ann on .*since {AT[:10]}.*waiting 0\.2 s"),
            SurveyLock(tmp_path, wait_s=0.2).held("Bo", AT),
        ):
            pass
        assert 0.2 <= time.monotonic() - started < 2


def test_the_second_goes_on_as_soon_as_the_first_is_done(tmp_path: Path) -> None:
    got = []

    def second() -> None:
        with SurveyLock(tmp_path, wait_s=5).held("Bo", AT):
            got.append("second")

    with SurveyLock(tmp_path).held("Ann", AT):
        waiting = threading.Thread(target=second)
        waiting.start()
        time.sleep(0.05)
        got.append("first")
    waiting.join()
    assert got == ["first", "second"]


def test_the_lock_is_free_after_a_failure_inside(tmp_path: Path) -> None:
    with pytest.raises(ZeroDivisionError), SurveyLock(tmp_path).held("Ann", AT):
        raise ZeroDivisionError
    with SurveyLock(tmp_path, wait_s=0).held("Bo", AT) as locked:
        assert locked


def test_the_text_in_the_lock_file_only_informs(tmp_path: Path) -> None:
    (tmp_path / LOCK_FILE).write_bytes(b'\xff\0 not JSON\n{"by": 3}\n[[[\n"x"\n')
    with SurveyLock(tmp_path, wait_s=0).held("Ann", AT) as locked:
        assert locked
    assert (tmp_path / LOCK_FILE).read_bytes() == b""


def test_who_has_the_survey_open_is_told_to_the_next(tmp_path: Path) -> None:
    elsewhere = Present("Bo \x1b[2J", "other-laptop", 7, AT)
    lock = SurveyLock(tmp_path)
    with lock.held("Ann", AT):
        pass
    (tmp_path / LOCK_FILE).write_text(_as_text(elsewhere))
    assert lock.enter("Ann", AT) == (elsewhere,)
    assert lock.others() == (elsewhere,)
    assert "\x1b" not in str(elsewhere)
    with lock.held("Ann", AT):
        pass
    assert "Ann" in (tmp_path / LOCK_FILE).read_text(), "an append leaves the notes alone"
    lock.leave()
    assert (tmp_path / LOCK_FILE).read_text() == _as_text(elsewhere)


def test_a_process_that_died_on_this_machine_is_not_told(tmp_path: Path) -> None:
    child = os.posix_spawn("/bin/true", ["true"], {})
    os.waitpid(child, 0)
    host = Present.here("Bo", AT).host
    (tmp_path / LOCK_FILE).write_text(_as_text(Present("Bo", host, child, AT)))
    lock = SurveyLock(tmp_path)
    assert lock.others() == ()
    assert lock.enter("Ann", AT) == ()
    assert '"Bo"' not in (tmp_path / LOCK_FILE).read_text()


def test_a_missing_survey_is_said(tmp_path: Path) -> None:
    lock = SurveyLock(tmp_path / "nowhere")
    with pytest.raises(RecordError, match="no folder 'nowhere'"), lock.held("Ann", AT):
        pass
    assert lock.enter("Ann", AT) == ()


def test_a_lock_file_that_is_a_link_is_not_followed(tmp_path: Path) -> None:
    (tmp_path / LOCK_FILE).symlink_to(tmp_path / "elsewhere")
    with pytest.raises(RecordError, match="cannot be written"), SurveyLock(tmp_path).held("A", AT):
        pass
    assert not (tmp_path / "elsewhere").exists()


def _as_text(one: Present) -> str:
    import json
    from dataclasses import asdict

    return json.dumps(asdict(one)) + "\n"
