"""A signed acceptance verified as a stranger would: from the file, with ssh-keygen alone.

Nothing of the package reads or verifies here; it only makes the survey. The text is rebuilt
from the JSON lines as the guide describes it, the signature is taken apart by the layout of
OpenSSH's PROTOCOL.sshsig (*memory*), and ``ssh-keygen -Y verify`` (OpenSSH) is the judge.
"""

import base64
import json
import shutil
import struct
import subprocess
from pathlib import Path
from typing import Any

import pytest

from roughness.desk.making import new_survey
from roughness.desk.recording import Recorder
from roughness.desk.reviewing import Reviewer
from roughness.desk.rows import rows
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


@pytest.fixture
def lines(tmp_path: Path) -> list[dict[str, Any]]:
    """The lines of a reach's trail with a signed acceptance at the end, read as plain JSON."""
    key = ["ssh-keygen", "-q", "-t", "ed25519", "-N", "", "-C", "", "-f", str(tmp_path / "key")]
    subprocess.run(key, check=True)
    reach = Reach(reach='Weir "Süd"')
    ada = Recorder(new_survey(tmp_path / "s", "Ada", reaches=[reach]), "Ada")
    ada.add_condition(FlowCondition(condition="Q 100, flood"))
    ada.add_part(reach.reach, Part(part="channel", setting="channel"))
    where = {"part": "channel", "condition": "Q 100, flood", "setting": "channel"}
    estimate = {**where, "handbook": "usgs-wsp-2339", "factors": FACTORS}
    ada.record(reach.reach, json.dumps(estimate).encode(), "test")
    (row,) = rows(ada.survey)
    Reviewer(Recorder(ada.survey, "Réa Holm")).accept(row, key=tmp_path / "key")
    (trail,) = (tmp_path / "s" / "reaches").glob("*.jsonl")
    return [json.loads(line) for line in trail.read_bytes().splitlines()]


def text_of(first: dict[str, Any], accept: dict[str, Any]) -> bytes:
    data = accept["data"]
    said = {name: first["data"][name] for name in ("survey", "reach")}
    said |= {name: data[name] for name in ("part", "condition", "head", "n")}
    said |= {"format": 1, "verdict": "accept", "by": accept["by"], "at": accept["at"]}
    text = json.dumps(said, sort_keys=True, ensure_ascii=False, separators=(",", ":"))
    return (text + "\n").encode()


def verified(folder: Path, name: str, key: str, signature: str, text: bytes) -> bool:
    (folder / "list").write_text(f'"{name}" {key}\n', encoding="utf-8")
    (folder / "sig").write_text(signature, encoding="utf-8")
    words = ["-f", str(folder / "list"), "-I", name, "-n", "acceptance@roughness"]
    command = ["ssh-keygen", "-Y", "verify", *words, "-s", str(folder / "sig")]
    return subprocess.run(command, input=text, capture_output=True, check=False).returncode == 0


def test_ssh_keygen_alone_verifies_the_text_rebuilt_from_the_trail(
    lines: list[dict[str, Any]], tmp_path: Path
) -> None:
    first, accept = lines[0], lines[-1]
    assert accept["kind"] == "accept"
    key = (tmp_path / "key.pub").read_text().strip()
    signature = accept["data"]["signature"]
    assert verified(tmp_path, accept["by"], key, signature, text_of(first, accept))


@pytest.mark.parametrize("name", ["survey", "reach", "part", "condition", "head", "n", "by", "at"])
def test_no_word_of_the_signed_text_can_be_changed(
    lines: list[dict[str, Any]], tmp_path: Path, name: str
) -> None:
    first, accept = lines[0], lines[-1]
    key, signature = (tmp_path / "key.pub").read_text().strip(), accept["data"]["signature"]
    signer = accept["by"]
    place = next(one for one in (first["data"], accept["data"], accept) if name in one)
    if name == "n":
        place["n"]["best"] += 1e-12
    else:
        place[name] = place[name][:-1] + "x"
    assert not verified(tmp_path, signer, key, signature, text_of(first, accept))


def strings_of(blob: bytes) -> list[bytes]:
    found = []
    while blob:
        (length,) = struct.unpack(">I", blob[:4])
        found.append(blob[4 : 4 + length])
        blob = blob[4 + length :]
    return found


def test_the_signature_names_an_ed25519_key_the_namespace_and_sha512(
    lines: list[dict[str, Any]], tmp_path: Path
) -> None:
    data = lines[-1]["data"]
    armour = data["signature"].strip().splitlines()
    blob = base64.b64decode("".join(armour[1:-1]))
    assert blob[:10] == b"SSHSIG" + struct.pack(">I", 1)
    key, namespace, reserved, digest, signature = strings_of(blob[10:])
    assert (namespace, reserved, digest) == (b"acceptance@roughness", b"", b"sha512")
    kind, point = strings_of(key)
    assert (kind, len(point)) == (b"ssh-ed25519", 32)
    kind, signed = strings_of(signature)
    assert (kind, len(signed)) == (b"ssh-ed25519", 64)
    assert data["signed_by"] == f"ssh-ed25519 {base64.b64encode(key).decode()}"
    assert data["signed_by"] == (tmp_path / "key.pub").read_text().strip()
