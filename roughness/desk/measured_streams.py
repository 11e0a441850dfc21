"""The catalogue of measured streams: the published ones and those of a survey."""

from collections.abc import Iterable
from dataclasses import dataclass
from itertools import chain
from pathlib import Path

from roughness.comparison.measured_streams import MeasuredStream
from roughness.comparison.stream_files import parse_streams
from roughness.errors import InputError
from roughness.quantities.foreign_text import printable
from roughness.shelf.measured_files import FOLDER, MeasuredFile, files_in, published_files


@dataclass(frozen=True, kw_only=True)
class Catalogue:
    """Streams with n from measured flow."""

    streams: tuple[MeasuredStream, ...]
    faults: tuple[InputError, ...]
    """What is wrong with files or streams that were left out, one sentence each."""


def measured_streams(survey: Path | None = None) -> Catalogue:
    """Return the published streams and, from ``SURVEY/measured/*.toml``, the survey's own.

    A file that cannot be used hides no other one. A key that is there already is a fault; the
    stream that had it first stays.

    Parameters
    ----------
    survey : Path, optional
        The survey's folder.

    Examples
    --------
    >>> catalogue = measured_streams()
    >>> rock = next(s for s in catalogue.streams if s.key == "rock-creek-darby")
    >>> rock.name, rock.d50_mm, rock.events[0].n
    ('Rock Creek near Darby, Montana', 220.0, 0.075)
    """
    own = files_in(survey / FOLDER) if survey is not None else ()
    return _gathered(chain(published_files(), own))


def _gathered(files: Iterable[MeasuredFile | InputError]) -> Catalogue:
    streams: dict[str, MeasuredStream] = {}
    faults: list[InputError] = []
    for file in files:
        try:
            if isinstance(file, InputError):
                raise file
            found = parse_streams(file.raw, file.where).streams
        except InputError as error:
            faults.append(error)
            continue
        for stream in found:
            if stream.key in streams:
                faults.append(_known_already(stream, streams[stream.key], file.where))
            streams.setdefault(stream.key, stream)
    return Catalogue(streams=tuple(streams.values()), faults=tuple(faults))


def _known_already(stream: MeasuredStream, first: MeasuredStream, where: str) -> InputError:
    return InputError(
        f"the key is that of {printable(first.name)} already",
        where=f"{where}: streams.{stream.key}",
        wanted="give each stream a key of its own",
    )
