"""Signed acceptances: what is signed, by which key, and what check says of whose it is."""

import json
import shutil
import subprocess
from argparse import Namespace
from pathlib import Path

import pytest

from roughness.commands.check import run as run_check
from roughness.custody.signed_text import head_of_signature, signed_text
from roughness.desk.checking import Checked, check
from roughness.desk.folder import SurveyFolder
from roughness.desk.identity import allowed_signers, signing_key
from roughness.desk.making import new_survey
from roughness.desk.places import place_of
from roughness.desk.recording import Recorder
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import Row, rows
from roughness.desk.signatures import SignatureFound, text_to_sign
from roughness.desk.signing import sign
from roughness.errors import InputError
from roughness.survey.stream import FlowCondition, Part, Reach
from roughness.trail.lines import Line, encoded

needs_ssh_keygen = pytest.mark.skipif(
    shutil.which("ssh-keygen") is None, reason="ssh-keygen (openssh-client) is not installed"
)
FLOOD, CHANNEL = "design flood", "main channel"
ESTIMATE = {
    "part": CHANNEL,
    "condition": FLOOD,
    "handbook": "usgs-wsp-2339",
    "setting": "channel",
    "factors": {
        "base": {"grade": "gravel"},
        "irregularity": {"grade": "minor"},
        "variation": {"grade": "gradual"},
        "obstruction": {"grade": "negligible"},
        "vegetation": {"grade": "medium", "note": "willows, seen leafless"},
        "meander": {"grade": "minor"},
    },
}
# Made once with OpenSSH 9.2 by a key that was thrown away, over b"hi\n".
MADE = """-----BEGIN SSH SIGNATURE-----
U1NIU0lHAAAAAQAAADMAAAALc3NoLWVkMjU1MTkAAAAgfBojskgGR1WE6XNIBvO9isaxsg
grUrzRUOQdaQZQ0fMAAAAUYWNjZXB0YW5jZUByb3VnaG5lc3MAAAAAAAAABnNoYTUxMgAA
AFMAAAALc3NoLWVkMjU1MTkAAABA9oAnYZZ1sJX9/IJ4FakX1hiCefgsTzTwkSZoLQB6lD
CCwHcFK+jua3Q/VJDeaYCtFO6P/Sf+DAkc4mdnOMZaDg==
-----END SSH SIGNATURE-----
"""


@pytest.fixture(autouse=True)
def config(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    """A configuration of this test alone; the allowed-signers file is not there yet."""
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    monkeypatch.delenv("ROUGHNESS_SIGNING_KEY", raising=False)
    monkeypatch.setenv("ROUGHNESS_ALLOWED_SIGNERS", str(tmp_path / "allowed"))
    return tmp_path


@pytest.fixture
def ada(tmp_path: Path) -> Recorder:
    pen = Recorder(new_survey(tmp_path / "s", "Ada", reaches=[Reach(reach="Weir")]), "Ada")
    pen.add_condition(FlowCondition(condition=FLOOD))
    pen.add_part("Weir", Part(part=CHANNEL, setting="channel"))
    pen.record("Weir", json.dumps(ESTIMATE).encode(), "test")
    return pen


def new_key(folder: Path, name: str = "key", kind: str = "ed25519") -> Path:
    path = folder / name
    words = ["ssh-keygen", "-q", "-t", kind, "-N", "", "-C", "", "-f", str(path)]
    subprocess.run(words, check=True)
    return path


def allow(folder: Path, name: str, key: Path, more: str = "") -> None:
    line = f'"{name}" {more} {key.with_suffix(".pub").read_text()}'
    (folder / "allowed").write_text(line, encoding="utf-8")


def row(survey: SurveyFolder) -> Row:
    return next(iter(rows(survey)))


def signed(ada: Recorder, key: Path, by: str = "Rea") -> Line:
    return Reviewer(Recorder(ada.survey, by)).accept(row(ada.survey), key=key)


def checked(ada: Recorder) -> Checked:
    return check(SurveyFolder(ada.survey.folder))


def one_signature(ada: Recorder) -> SignatureFound:
    (found,) = checked(ada).signatures
    return found


# -- the text and the signature, without ssh-keygen -----------------------------------------


def test_the_signed_text_is_one_line_with_sorted_keys_and_no_blanks() -> None:
    text = signed_text(
        survey="ab12", reach="Wéir", part="p", condition="c", head="0f",
        n={"low": 0.03, "best": 0.035, "high": 0.04, "more": 1}, by="Rea",
        at="2026-06-03T18:20:00Z",
    )  # fmt: skip
    assert (
        text
        == (
            '{"at":"2026-06-03T18:20:00Z","by":"Rea","condition":"c","format":1,"head":"0f",'
            '"n":{"best":0.035,"high":0.04,"low":0.03},"part":"p","reach":"Wéir","survey":"ab12",'
            '"verdict":"accept"}\n'
        ).encode()
    )


def test_a_signature_says_by_which_key_and_for_what_it_was_made() -> None:
    head = head_of_signature(MADE)
    key = "AAAAC3NzaC1lZDI1NTE5AAAAIHwaI7JIBkdVhOlzSAbzvYrGsbIIK1K80VDkHWkGUNHz"
    assert head.public_key == f"ssh-ed25519 {key}"
    assert (head.key_type, head.namespace) == ("ssh-ed25519", "acceptance@roughness")


@pytest.mark.parametrize(
    "text",
    ["", "x", MADE[40:], MADE + MADE, MADE.replace("U1NI", "U1NJ"), MADE.replace("U1NI", "U1N"),
     "-----BEGIN SSH SIGNATURE-----\nU1NIU0lHAAAAAQAAADMA\n-----END SSH SIGNATURE-----\n",
     "-----BEGIN SSH SIGNATURE-----\nU1NIU0lHAAAAAQ==\n-----END SSH SIGNATURE-----\n"],
)  # fmt: skip
def test_what_is_no_signature_is_refused_in_a_sentence(text: str) -> None:
    with pytest.raises(InputError, match="SSH signature"):
        head_of_signature(text)


# -- whose key, and whose word counts -------------------------------------------------------


def test_the_key_comes_from_the_environment_or_from_what_was_kept(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    assert signing_key() is None
    kept = tmp_path / "config" / "roughness" / "memory.json"
    kept.parent.mkdir(parents=True)
    kept.write_text('{"signing_key": "/k/one"}', encoding="utf-8")
    assert signing_key() == Path("/k/one")
    monkeypatch.setenv("ROUGHNESS_SIGNING_KEY", "/k/two")
    assert signing_key() == Path("/k/two")
    kept.write_text('{"signing_key": 7}', encoding="utf-8")
    monkeypatch.delenv("ROUGHNESS_SIGNING_KEY")
    assert signing_key() is None


def test_the_allowed_signers_lie_in_the_configuration_unless_named(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    assert allowed_signers() == tmp_path / "allowed"
    monkeypatch.delenv("ROUGHNESS_ALLOWED_SIGNERS")
    assert allowed_signers() == tmp_path / "config" / "roughness" / "allowed_signers"


# -- signing and checking -------------------------------------------------------------------


def test_nothing_is_said_of_signatures_where_none_stands(ada: Recorder) -> None:
    line = Reviewer(Recorder(ada.survey, "Rea")).accept(row(ada.survey))
    assert not {"signature", "signed_by"} & line.data.keys()
    assert checked(ada).signatures == ()


@needs_ssh_keygen
@pytest.mark.parametrize("by", ["Rea", "Réa Holm-Ødegård", "-Ooption", "O'Neil; $(id)", "水"])
def test_a_signed_acceptance_is_verified_as_signed_by_the_one_it_names(
    ada: Recorder, tmp_path: Path, by: str
) -> None:
    key = new_key(tmp_path)
    allow(tmp_path, by, key)
    line = signed(ada, key, by)
    assert line.data["signed_by"] == " ".join(key.with_suffix(".pub").read_text().split()[:2])
    found = one_signature(ada)
    assert (found.verdict, found.line, found.by) == ("verified", line.number, by)
    assert found.says.endswith(f"is verified as signed by {by}")
    assert checked(ada).passed


@needs_ssh_keygen
def test_names_are_compared_as_people_would(ada: Recorder, tmp_path: Path) -> None:
    key = new_key(tmp_path)
    allow(tmp_path, "rea@example.org,REA", key)
    signed(ada, key)
    assert one_signature(ada).says.endswith("verified as signed by REA")


@needs_ssh_keygen
def test_all_that_are_accepted_in_one_step_are_signed(ada: Recorder, tmp_path: Path) -> None:
    key = new_key(tmp_path)
    rea = Reviewer(Recorder(ada.survey, "Rea"))
    (line,) = rea.accept_all([row(ada.survey)], key=key)
    assert line.data["signature"]


@needs_ssh_keygen
def test_a_key_that_nobody_listed_is_asked_about_and_breaks_nothing(
    ada: Recorder, tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    allow(tmp_path, "Rea", new_key(tmp_path, "other"))
    line = signed(ada, new_key(tmp_path))
    found = one_signature(ada)
    assert found.verdict == "unknown key" and line.data["signed_by"] in found.says
    assert checked(ada).intact
    run_check(Namespace(survey=ada.survey.folder, json=False))
    out = " ".join(capsys.readouterr().out.split())
    assert "ask: reaches/weir-" in out and "is signed by a key that" in out


@needs_ssh_keygen
def test_without_an_allowed_signers_file_nobody_is_named(ada: Recorder, tmp_path: Path) -> None:
    signed(ada, new_key(tmp_path))
    found = one_signature(ada)
    assert found.verdict == "not verified" and "no allowed-signers file" in found.says
    assert checked(ada).intact


@needs_ssh_keygen
def test_a_list_inside_the_survey_does_not_count(
    ada: Recorder, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    key = new_key(tmp_path)
    allow(tmp_path, "Rea", key)
    inside = ada.survey.folder / "allowed"
    (tmp_path / "allowed").rename(inside)
    (tmp_path / "allowed").symlink_to(inside)
    signed(ada, key)
    found = one_signature(ada)
    assert found.verdict == "not verified" and "lies in the survey" in found.says


@needs_ssh_keygen
def test_the_key_of_another_known_person_is_a_fault(ada: Recorder, tmp_path: Path) -> None:
    key = new_key(tmp_path)
    allow(tmp_path, "Bo", key)
    signed(ada, key, "Rea")
    assert one_signature(ada).verdict == "wrong"
    (fault,) = checked(ada).broken
    assert "names Rea and is signed with the key of Bo" in fault.what


@needs_ssh_keygen
@pytest.mark.parametrize(
    ("more", "verdict"),
    [
        ('namespaces="acceptance@roughness"', "verified"),
        ('namespaces="git"', "unknown key"),
        ('valid-before="20200101"', "unknown key"),
        ('valid-after="20200101"', "verified"),
    ],
)
def test_what_the_list_says_of_a_key_counts(
    ada: Recorder, tmp_path: Path, more: str, verdict: str
) -> None:
    key = new_key(tmp_path)
    allow(tmp_path, "Rea", key, more)
    signed(ada, key)
    assert one_signature(ada).verdict == verdict


def again(ada: Recorder, line: Line, **data: object) -> None:
    """Write an accept line once more at the end, as somebody with an editor could."""
    path = ada.survey.reach_path("Weir")
    (head,) = SurveyFolder(ada.survey.folder).reach_trail("Weir").heads
    raw = encoded((head,), line.at, line.by, "accept", {**line.data, **data})
    path.write_bytes(path.read_bytes() + raw + b"\n")


@needs_ssh_keygen
def test_a_signed_line_copied_behind_a_return_is_found(ada: Recorder, tmp_path: Path) -> None:
    key = new_key(tmp_path)
    allow(tmp_path, "Rea", key)
    line = signed(ada, key)
    place = place_of(ada.survey, "Weir", CHANNEL, FLOOD)
    Reviewer(Recorder(ada.survey, "Rea")).return_(place, "the willows were cut")
    again(ada, line)
    assert [found.verdict for found in checked(ada).signatures] == ["verified", "wrong"]
    assert any("repeats what was signed" in fault.what for fault in checked(ada).broken)


@needs_ssh_keygen
@pytest.mark.parametrize(
    ("at", "verdict"),
    [("2019-06-03T18:20:00+02:00", "verified"), ("2020-06-03T18:20:00+02:00", "unknown key")],
)
def test_a_key_that_expired_later_still_speaks_for_what_it_signed_before(
    ada: Recorder, tmp_path: Path, at: str, verdict: str
) -> None:
    key = new_key(tmp_path)
    allow(tmp_path, "Rea", key, 'valid-before="20200101"')
    rea = Reviewer(Recorder(ada.survey, "Rea"))
    data = rea.accept(row(ada.survey)).data
    made = sign(text_to_sign(ada.survey.reach_trail("Weir"), data, "Rea", at), key)
    more = {"signature": made.armoured, "signed_by": made.public_key}
    rea.pen.say_of_reach("Weir", "accept", {**data, **more}, at=at)
    assert one_signature(ada).verdict == verdict
