"""The tags of a file as records: sections, tables, entities and objects, each from one group code 0 to the next."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from operator import itemgetter

from ezdxf.lldxf.types import DXFTag

from flatprep.drawing.columns import Codes

COMMENT = 999
_HANDLE = 5
HANDLES = {"DIMSTYLE": 105}
"""Codes of handles where they are others: there 5 is the name of an arrow."""


class NotSiftedError(Exception):
    """A file that is not built as files are."""


class OddFileError(NotSiftedError):
    """A file whose tags have to be put right (`flatprep.drawing.mend`) before anyone reads it: some would be lost."""


@dataclass(frozen=True, slots=True)
class Tags:
    """Group codes and values that follow each other in a file."""

    codes: list[int] = field(default_factory=list)
    values: list[str] = field(default_factory=list)

    @property
    def text(self) -> str:
        """The tags as a file holds them."""
        return "".join(f"{code}\n{value}\n" for code, value in zip(self.codes, self.values, strict=True))

    @property
    def compiled(self) -> Iterator[DXFTag]:
        """The tags as ezdxf takes them."""
        return map(DXFTag, self.codes, self.values)


@dataclass(frozen=True, slots=True)
class Records(Tags):
    """All tags of a file, and where each record begins.

    Attributes
    ----------
    starts : list of int
        Place of each record's first tag.
    kinds : list of str
        Its value, such as ``LINE``.
    sections : dict of str to int
        Name -> number of the record that opens the section.
    """

    starts: list[int] = field(default_factory=list)
    kinds: list[str] = field(default_factory=list)
    sections: dict[str, int] = field(default_factory=dict)

    def section(self, name: str) -> range:
        """Numbers of the records in a section, none where there is no such section."""
        if name not in self.sections:
            return range(0)
        return range(self.sections[name] + 1, self.kinds.index("ENDSEC", self.sections[name]))

    def make_up(self, records: range) -> Codes:
        """Group codes of records that follow each other."""
        return tuple(self.codes[self.starts[records.start] : self.starts[records.stop]])

    def value(self, k: int, code: int) -> str:
        """First value of a code in a record, empty where it has none."""
        start, end = self.starts[k], self.starts[k + 1]
        return self.values[self.codes.index(code, start, end)] if code in self.codes[start:end] else ""

    def handle(self, k: int) -> str:
        """Handle of an entity, empty where it has none."""
        return self.value(k, _HANDLE)

    def has_handles(self, *sections: str) -> bool:
        """Whether anything in these sections has a handle."""
        records = (k for name in sections for k in self.section(name))
        return any(HANDLES.get(self.kinds[k], _HANDLE) in self.tags(k).codes for k in records)

    def tags(self, k: int) -> Tags:
        """All tags of a record."""
        return self._between(self.starts[k], self.starts[k + 1])

    def replaced(self, records: Mapping[int, Tags]) -> Tags:
        """Return all tags, with others in the place of some records."""
        pieces: list[Tags] = []
        at = 0
        for k, tags in sorted(records.items(), key=itemgetter(0)):
            pieces += [self._between(at, self.starts[k]), tags]
            at = self.starts[k + 1]
        pieces.append(self._between(at, len(self.codes)))
        return Tags([c for p in pieces for c in p.codes], [v for p in pieces for v in p.values])

    def _between(self, first: int, last: int) -> Tags:
        return Tags(self.codes[first:last], self.values[first:last])


def records_of(text: str) -> Records:
    """Part a file into its records.

    Raises
    ------
    OddFileError
        When it does not end with its end, a section is there twice, or names are padded with blanks.
    NotSiftedError, ValueError, LookupError
        When it does not begin with a section, or a group code is no number.
    """
    lines = text.rstrip().split("\n")
    codes, values = list(map(int, lines[0::2])), lines[1::2]
    if len(codes) != len(values) or codes[-1] != 0 or values[-1] != "EOF":
        raise OddFileError
    if COMMENT in codes:
        values = [value for code, value in zip(codes, values, strict=True) if code != COMMENT]
        codes = [code for code in codes if code != COMMENT]
    starts = [k for k, code in enumerate(codes) if code == 0]
    kinds = [values[k].strip() for k in starts]
    heads = [k for k, kind in enumerate(kinds) if kind == "SECTION"]
    sections = {values[starts[k] + 1]: k for k in heads}
    padded = any(name != name.strip() for name in sections) or kinds != [values[k] for k in starts]
    if padded or len(sections) != len(heads) or kinds.count("ENDSEC") < len(heads):
        raise OddFileError
    if starts[0] != 0 or kinds[0] != "SECTION" or kinds.count("EOF") != 1:
        raise NotSiftedError
    return Records(codes, values, starts, kinds, sections)
