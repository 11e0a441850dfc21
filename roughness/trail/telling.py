"""A line in a plain sentence, and what a person may take back."""

from collections.abc import Callable, Mapping, Sequence
from typing import Any, Final

from roughness.quantities.foreign_text import printable, same_name_key
from roughness.quantities.printing import show_n, show_value
from roughness.trail.lines import Line
from roughness.trail.state import ReachState, SurveyState

# Taking these back would not undo what a person did: the begin of the trail, a note of
# heads, a merge, and a withdrawal (which is undone by withdrawing it by name).
_NOT_BY_UNDO: Final = frozenset({"begin", "heads", "withdraw", "merge"})


def withdrawable(state: ReachState | SurveyState, by: str) -> Line | None:
    """Return the last line of this person that still has an effect and can be taken back."""
    wanted = same_name_key(by)
    return next(
        (
            line
            for line in reversed(state.effective)
            if same_name_key(line.by) == wanted and line.kind not in _NOT_BY_UNDO
        ),
        None,
    )


def describe_line(line: Line) -> str:
    """Say what a line did: ``obstruction of main channel at design flood: negligible``."""
    tell = _TELL.get(line.kind, _tell_unknown)
    try:
        return printable(tell(line.data))
    except (KeyError, TypeError, AttributeError, ValueError):
        return printable(f"a {line.kind} line whose data does not fit its kind")


def _place(data: Mapping[str, Any]) -> str:
    segment = f"{data['segment']} in " if data.get("segment") else ""
    return f"{segment}{data['part']} at {data['condition']}"


def _tell_choose(data: Mapping[str, Any]) -> str:
    choice = data["choice"]
    carried = f", carried from {data['carried_from']['reach']}" if data.get("carried_from") else ""
    return f"{data['factor']} of {_place(data)}: {_tell_choice(choice)}{carried}"


def _tell_choice(choice: Mapping[str, Any]) -> str:
    told = [choice["grade"]] if choice.get("grade") else []
    told += [
        f"{word.replace('_', ' ')} {_shown(value)}"
        for word, value in choice.items()
        if word not in ("grade", "note") and value is not None
    ]
    return ", ".join(told) or "open"


def _shown(value: Any) -> str:
    if isinstance(value, bool):
        return "yes" if value else "no"
    return show_value(value) if isinstance(value, int | float) else str(value)


def _tell_estimate(data: Mapping[str, Any]) -> str:
    estimate = data["estimate"]
    named = [
        f"{factor} {choice.get('grade') or 'by measure'}"
        for factor, choice in (estimate.get("factors") or {}).items()
        if choice
    ]
    told = ", ".join(named) or _names([s["name"] for s in estimate["segments"]])
    return f"estimate of {_place(data)}: {told}"


def _tell_gate(data: Mapping[str, Any]) -> str:
    told = [f"depth {show_value(data['depth_m'])} m"] if data.get("depth_m") is not None else []
    told += [data["bank"]] if data.get("bank") else []
    told += ["mobile sand"] if data.get("mobile_sand") else []
    told += [_names([s["name"] for s in data["segments"]])] if data.get("segments") else []
    return f"setup of {_place(data)}: {', '.join([*told, data['handbook']])}"


def _tell_adopt(data: Mapping[str, Any]) -> str:
    return f"adopted n of {_place(data)}: {show_n(data['n'])}, {data['reason']}"


def _tell_described(data: Mapping[str, Any]) -> str:
    told = [
        f"{key.replace('_', ' ')} {'taken back' if value is None else _shown(value)}"
        for key, value in data.items()
        if key != "position"
    ]
    told += ["position"] if "position" in data else []
    return f"description: {', '.join(told)}"


def _names(names: Sequence[str]) -> str:
    return f"{', '.join(names)} told apart"


def _tell_question(data: Mapping[str, Any]) -> str:
    factor = f"{data['factor']} of " if data.get("factor") else ""
    again = "asked again" if data.get("follows") else "asked"
    return f"{again} about {factor}{_place(data)}: {data['text']}"


def _tell_finding_answered(data: Mapping[str, Any]) -> str:
    return f"answered the finding {data['rule']} of {_place(data)}: {data['text']}"


def _tell_accept(data: Mapping[str, Any]) -> str:
    n = data["n"]
    told = f"accepted {_place(data)} with n {show_n(n['best'])}"
    told += f" ({show_n(n['low'])} to {show_n(n['high'])})"
    told += f", overruling what stood against it: {data['overruled']}" if data["overruled"] else ""
    return told + (", as the one who estimated it" if data["same_person"] else "")


def _tell_consensus(data: Mapping[str, Any]) -> str:
    what = _tell_estimate(data).removeprefix("estimate of ")
    return f"consensus on {what}; because {data['reason']}"


def _tell_evidence(data: Mapping[str, Any]) -> str:
    told = f"evidence {data['name']}"
    told += f", {data['caption']}" if data.get("caption") else ""
    return told + (f" (for {', '.join(data['factors'])})" if data.get("factors") else "")


def _tell_unknown(data: Mapping[str, Any]) -> str:
    return f"a line of a kind that this version does not know ({len(data)} entries)"


_TELL: Final[dict[str, Callable[[Mapping[str, Any]], str]]] = {
    "begin": lambda data: f"beginning of {data.get('reach') or data['name']}",
    "describe": _tell_described,
    "flow-condition": lambda data: f"flow condition {data['condition']}",
    "reach": lambda data: f"reach {data['reach']}",
    "order": lambda data: f"order of {len(data['reaches'])} reaches",
    "heads": lambda data: f"ends of {len(data['heads'])} trails noted ({data['why']})",
    "withdraw": lambda data: f"withdrawal of line {data['line'][:12]}",
    "part": lambda data: f"part {data['part']} ({data['setting']})",
    "visit": lambda data: f"visit {data['visit']}",
    "gate": _tell_gate,
    "choose": _tell_choose,
    "estimate": _tell_estimate,
    "adopt": _tell_adopt,
    "question": _tell_question,
    "answer": lambda data: f"answered: {data['text']}",
    "finding-answered": _tell_finding_answered,
    "accept": lambda data: _tell_accept({"overruled": None, "same_person": None} | dict(data)),
    "return": lambda data: f"returned {_place(data)}: {data['reason']}",
    "opinion": lambda data: f"second {_tell_estimate(data)}",
    "consensus": _tell_consensus,
    "evidence": _tell_evidence,
    "merge": lambda _data: "two ways of this trail united",
}
