"""Keys that cannot sign, signatures that were tampered with, and a tool that is not there."""

import base64
import json
import os
import shutil
import subprocess
import sys
import time
from collections.abc import Iterator, Mapping
from pathlib import Path
from typing import Any

import pytest

from roughness.desk import signing
from roughness.desk.checking import check
from roughness.desk.folder import SurveyFolder
from roughness.desk.making import new_survey
from roughness.desk.recording import Recorder
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import Row, rows
from roughness.desk.signatures import SignatureFound
from roughness.desk.signing import SigningToolError, sign
from roughness.errors import InputError
from roughness.survey.stream import FlowCondition, Part, Reach

pytestmark = pytest.mark.skipif(
    shutil.which("ssh-keygen") is None, reason="ssh-keygen (openssh-client) is not installed"
)
FACTORS = {
    "base": {"grade": "gravel"},
    "irregularity": {"grade": "minor"},
    "variation": {"grade": "gradual"},
    "obstruction": {"grade": "negligible"},
    "vegetation": {"grade": "medium", "note": "willows, seen leafless"},
    "meander": {"grade": "minor"},
}


@pytest.fixture(autouse=True)
def config(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Path:
    monkeypatch.setenv("XDG_CONFIG_HOME", str(tmp_path / "config"))
    monkeypatch.setenv("ROUGHNESS_ALLOWED_SIGNERS", str(tmp_path / "allowed"))
    monkeypatch.delenv("SSH_AUTH_SOCK", raising=False)
    return tmp_path


def new_key(path: Path, kind: str = "ed25519", passphrase: str = "") -> Path:
    words = ["ssh-keygen", "-q", "-t", kind, "-N", passphrase, "-C", "", "-f", str(path)]
    subprocess.run(words, check=True)
    return path


@pytest.fixture
def key(tmp_path: Path) -> Path:
    path = new_key(tmp_path / "key")
    listed = f"Rea {path.with_suffix('.pub').read_text()}"
    (tmp_path / "allowed").write_text(listed, encoding="utf-8")
    return path


@pytest.fixture
def survey(tmp_path: Path) -> SurveyFolder:
    ada = Recorder(new_survey(tmp_path / "s", "Ada", reaches=[Reach(reach="Weir")]), "Ada")
    ada.add_condition(FlowCondition(condition="flood"))
    ada.add_part("Weir", Part(part="channel", setting="channel"))
    filed = {"part": "channel", "condition": "flood", "setting": "channel"}
    estimate = {**filed, "handbook": "usgs-wsp-2339", "factors": FACTORS}
    ada.record("Weir", json.dumps(estimate).encode(), "test")
    return ada.survey


def row(survey: SurveyFolder) -> Row:
    return next(iter(rows(survey)))


def found(survey: SurveyFolder) -> SignatureFound:
    (one,) = check(SurveyFolder(survey.folder)).signatures
    return one


# -- keys -----------------------------------------------------------------------------------


def refused(survey: SurveyFolder, key: Path) -> str:
    """Return the sentence; nothing may be written."""
    before = survey.reach_path("Weir").read_bytes()
    with pytest.raises(InputError) as refusal:
        Reviewer(Recorder(survey, "Rea")).accept(row(survey), key=key)
    assert survey.reach_path("Weir").read_bytes() == before
    assert "\n" not in str(refusal.value)
    return str(refusal.value)


def test_a_key_that_is_not_there_or_is_no_file_is_refused(
    survey: SurveyFolder, tmp_path: Path
) -> None:
    assert "is not there" in refused(survey, tmp_path / "nothing")
    assert "is no file" in refused(survey, tmp_path)
    (tmp_path / "round").symlink_to(tmp_path / "round")
    assert "is not there" in refused(survey, tmp_path / "round")
    os.mkfifo(tmp_path / "pipe")
    assert "is no file" in refused(survey, tmp_path / "pipe")
    assert "is no file" in refused(survey, Path("/dev/zero"))
    assert "is not there" in refused(survey, Path("a\x00b"))
    assert "is not there" in refused(survey, Path("x" * 5000))


def test_a_file_that_is_no_key_is_refused(survey: SurveyFolder, tmp_path: Path) -> None:
    (tmp_path / "junk").write_text("no key\x1b[2J\n", encoding="utf-8")
    (tmp_path / "junk").chmod(0o600)
    said = refused(survey, tmp_path / "junk")
    assert "is no key" in said and "\x1b" not in said


@pytest.mark.parametrize("kind", ["rsa", "ecdsa"])
def test_a_key_of_another_type_is_refused(survey: SurveyFolder, tmp_path: Path, kind: str) -> None:
    said = refused(survey, new_key(tmp_path / kind, kind))
    assert f"{kind}" in said and "Ed25519" in said


@pytest.mark.skipif(os.name == "nt", reason="permissions are told otherwise there")
def test_a_key_that_others_can_read_is_refused(survey: SurveyFolder, key: Path) -> None:
    key.chmod(0o644)
    assert "can be read by others; chmod 600" in refused(survey, key)


def test_a_public_key_without_its_private_one_is_refused(
    survey: SurveyFolder, key: Path, tmp_path: Path
) -> None:
    public = shutil.copy(key.with_suffix(".pub"), tmp_path / "alone.pub")
    assert "no private key here" in refused(survey, Path(public))


def test_a_key_named_like_an_option_signs(
    survey: SurveyFolder, key: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(tmp_path)
    key.rename("-Oprint-pubkey")
    Reviewer(Recorder(survey, "Rea")).accept(row(survey), key=Path("-Oprint-pubkey"))
    assert found(survey).verdict == "verified"


def test_a_link_to_a_key_signs(survey: SurveyFolder, key: Path, tmp_path: Path) -> None:
    (tmp_path / "link").symlink_to(key)
    Reviewer(Recorder(survey, "Rea")).accept(row(survey), key=tmp_path / "link")
    assert found(survey).verdict == "verified"


# -- passphrases ----------------------------------------------------------------------------


@pytest.mark.skipif(os.name == "nt", reason="pseudo-terminals")
def test_a_locked_key_never_asks_across_the_screen(tmp_path: Path) -> None:
    import pty

    locked = new_key(tmp_path / "locked", passphrase="a secret")
    code = (
        "import fcntl, sys, termios; from pathlib import Path\n"
        "fcntl.ioctl(0, termios.TIOCSCTTY, 0); open('/dev/tty').close()\n"
        "from roughness.desk.signing import sign\n"
        "try: sign(b'text', Path(sys.argv[1]))\n"
        "except Exception as error: print('said:', error)\n"
    )
    screen, terminal = pty.openpty()
    asked = tmp_path / "asked"
    (tmp_path / "askpass").write_text(f"#!/bin/sh\ntouch {asked}\n")
    (tmp_path / "askpass").chmod(0o700)
    env = os.environ | {"SSH_ASKPASS": str(tmp_path / "askpass"), "SSH_ASKPASS_REQUIRE": "force"}
    words = [sys.executable, "-c", code, str(locked)]
    with subprocess.Popen(
        words, stdin=terminal, stdout=terminal, stderr=terminal, start_new_session=True, env=env
    ) as run:
        assert run.wait(timeout=60) == 0
    seen = os.read(screen, 65536).decode()
    os.close(screen)
    os.close(terminal)
    assert seen.startswith("said: ") and "is locked with a passphrase" in seen
    assert "Enter" not in seen and not asked.exists()


@pytest.fixture
def agent(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> Iterator[None]:
    if shutil.which("ssh-agent") is None or shutil.which("ssh-add") is None:
        pytest.skip("ssh-agent is not installed")
    monkeypatch.chdir(tmp_path)  # the path of a socket has to be short
    with subprocess.Popen(["ssh-agent", "-D", "-a", "agent"], stdout=subprocess.DEVNULL) as process:
        for _ in range(200):
            if Path("agent").exists():
                break
            time.sleep(0.02)
        monkeypatch.setenv("SSH_AUTH_SOCK", "agent")
        yield
        process.terminate()


def test_a_key_in_ssh_agent_signs_by_its_public_file(
    survey: SurveyFolder, key: Path, tmp_path: Path, agent: None
) -> None:
    subprocess.run(["ssh-add", "-q", str(key)], check=True)
    key.unlink()
    Reviewer(Recorder(survey, "Rea")).accept(row(survey), key=key.with_suffix(".pub"))
    assert found(survey).verdict == "verified"


# -- signatures that were tampered with -----------------------------------------------------


def with_accept(survey: SurveyFolder, **changes: Any) -> None:
    """Write the last line anew with other data, as somebody with an editor could."""
    path = survey.reach_path("Weir")
    *lines, last = path.read_bytes().splitlines(keepends=True)
    said = json.loads(last)
    data: Mapping[str, Any] = said["data"] | changes.pop("data", {})
    kept = {name: value for name, value in data.items() if value is not None}
    said |= changes
    said["data"] = kept
    path.write_bytes(b"".join([*lines, json.dumps(said).encode() + b"\n"]))


@pytest.fixture
def accepted(survey: SurveyFolder, key: Path) -> SurveyFolder:
    Reviewer(Recorder(survey, "Rea")).accept(row(survey), key=key)
    assert found(survey).verdict == "verified"
    return survey


def wrong(survey: SurveyFolder) -> str:
    """Return what is said of a signature that is wrong; `check` must not be passed."""
    checked = check(SurveyFolder(survey.folder))
    (one,) = checked.signatures
    assert one.verdict == "wrong" and not checked.intact
    assert any(fault.what == one.says and fault.line == one.line for fault in checked.broken)
    return one.says


@pytest.mark.parametrize(
    "change",
    [
        {"by": "Bo"},
        {"by": ""},
        {"by": "Rea\x00"},
        {"by": "\ud800"},
        {"by": "x" * 200_000},
        {"at": "2026-06-03T18:20:00Z"},
        {"at": "2026-02-30T18:20:00Z"},
        {"at": "0001-01-01T00:00:00+14:00"},
        {"data": {"n": {"low": 0.01, "best": 0.02, "high": 0.03}}},
        {"data": {"part": "left bank"}},
        {"data": {"condition": "low flow"}},
        {"data": {"head": "0" * 64}},
    ],
)
def test_a_line_that_says_something_else_than_was_signed_is_broken(
    accepted: SurveyFolder, change: dict[str, Any]
) -> None:
    with_accept(accepted, **change)
    assert "does not fit what it says" in wrong(accepted)


def test_a_changed_byte_anywhere_in_a_signature_is_found(accepted: SurveyFolder) -> None:
    path = accepted.reach_path("Weir")
    signature = json.loads(path.read_bytes().splitlines()[-1])["data"]["signature"]
    blob = bytearray(base64.b64decode("".join(signature.splitlines()[1:-1])))
    for at in range(0, len(blob), 7):
        blob[at] ^= 1
        changed = base64.b64encode(blob).decode()
        blob[at] ^= 1
        armour = f"-----BEGIN SSH SIGNATURE-----\n{changed}\n-----END SSH SIGNATURE-----\n"
        with_accept(accepted, data={"signature": armour})
        assert wrong(accepted), at


@pytest.mark.parametrize("armour", ["", "no signature", "\x1b[2J", "x" * 500_000])
def test_what_is_no_signature_is_broken(accepted: SurveyFolder, armour: str) -> None:
    with_accept(accepted, data={"signature": armour})
    assert "cannot be read" in wrong(accepted)


def test_a_signature_without_its_key_and_a_key_without_signature_are_broken(
    accepted: SurveyFolder,
) -> None:
    kept = accepted.reach_path("Weir").read_bytes()
    for word in ("signature", "signed_by"):
        with_accept(accepted, data={word: None})
        assert "without" in wrong(accepted)
        accepted.reach_path("Weir").write_bytes(kept)


def test_another_key_than_the_signature_names_is_broken(
    accepted: SurveyFolder, tmp_path: Path
) -> None:
    other = new_key(tmp_path / "other").with_suffix(".pub").read_text().strip()
    with_accept(accepted, data={"signed_by": other})
    assert "another key than it says" in wrong(accepted)


@pytest.mark.parametrize(("kind", "name"), [("rsa", "acceptance@roughness"), ("ed25519", "git")])
def test_a_key_of_another_type_or_a_signature_for_something_else_is_broken(
    accepted: SurveyFolder, tmp_path: Path, kind: str, name: str
) -> None:
    other = new_key(tmp_path / "other", kind)
    line = json.loads(accepted.reach_path("Weir").read_bytes().splitlines()[-1])
    from roughness.desk.signatures import text_to_sign

    trail = SurveyFolder(accepted.folder).reach_trail("Weir")
    text = text_to_sign(trail, line["data"], line["by"], line["at"])
    words = ["ssh-keygen", "-Y", "sign", "-f", str(other), "-n", name]
    made = subprocess.run(words, input=text, capture_output=True, check=True).stdout.decode()
    public = " ".join(other.with_suffix(".pub").read_text().split()[:2])
    with_accept(accepted, data={"signature": made, "signed_by": public})
    said = wrong(accepted)
    assert "not Ed25519" in said if kind == "rsa" else "made for git" in said


def test_a_list_that_is_no_list_confirms_nobody(accepted: SurveyFolder, tmp_path: Path) -> None:
    for raw in (b"", b"\x00\xff\n", b"Rea\n", b"Rea ssh-ed25519 AAAA\n", b'"Rea ssh-ed25519'):
        (tmp_path / "allowed").write_bytes(raw)
        assert found(accepted).verdict == "unknown key", raw
    (tmp_path / "allowed").unlink()
    (tmp_path / "allowed").mkdir()
    assert "is no file" in found(accepted).says


# -- the tool -------------------------------------------------------------------------------


def in_its_place(folder: Path, monkeypatch: pytest.MonkeyPatch, script: str) -> None:
    tools = folder / "tools"
    tools.mkdir()
    (tools / "ssh-keygen").write_text(f"#!/bin/sh\n{script}\n")
    (tools / "ssh-keygen").chmod(0o700)
    monkeypatch.setenv("PATH", f"{tools}:/usr/bin:/bin")


def test_without_ssh_keygen_nothing_is_signed_and_nothing_called_broken(
    accepted: SurveyFolder, key: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("PATH", str(tmp_path / "empty"))
    one = found(accepted)
    assert one.verdict == "not verified" and "ssh-keygen is not there" in one.says
    assert check(SurveyFolder(accepted.folder)).intact
    with pytest.raises(SigningToolError, match="is not there; install"):
        sign(b"text", key)


@pytest.mark.skipif(os.name == "nt", reason="shell scripts")
@pytest.mark.parametrize(
    ("script", "says"),
    [
        ("exec sleep 30", "did not answer within"),
        ("echo 'usage: old' >&2; exit 1", "failed .usage: old"),
        ("kill -9 $$", "failed"),
    ],
)
def test_a_tool_that_hangs_or_fails_is_said_and_nothing_called_broken(
    accepted: SurveyFolder, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, script: str, says: str
) -> None:
    monkeypatch.setattr(signing, "SECONDS", 0.5)
    in_its_place(tmp_path, monkeypatch, script)
    one = found(accepted)
    assert one.verdict == "not verified"
    with pytest.raises(SigningToolError, match=says):
        signing.fits(b"text", "signature")


@pytest.mark.skipif(os.name == "nt", reason="shell scripts")
def test_a_tool_that_hangs_is_ended_with_what_it_started(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setattr(signing, "SECONDS", 0.3)
    late = tmp_path / "late"
    in_its_place(tmp_path, monkeypatch, f"(sleep 1; touch {late}) & wait")
    with pytest.raises(SigningToolError, match="did not answer"):
        signing.fits(b"text", "signature")
    time.sleep(1.2)
    assert not late.exists()


@pytest.mark.skipif(os.name == "nt", reason="shell scripts")
@pytest.mark.parametrize("script", ["exit 0", "echo nonsense", "head -c 9999999 /dev/zero"])
def test_a_tool_that_hands_back_no_signature_writes_nothing(
    survey: SurveyFolder, key: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch, script: str
) -> None:
    in_its_place(tmp_path, monkeypatch, script)
    assert "SSH signature" in refused(survey, key)
