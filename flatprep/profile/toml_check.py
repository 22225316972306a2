"""Strict reading of TOML: a wrong type, a value out of range and an unknown key each get one clear message."""

import tomllib
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from math import isfinite
from pathlib import Path

from flatprep.base.errors import FlatprepError, ProfileError
from flatprep.base.names import did_you_mean, nearest, printable
from flatprep.base.units import MM_PER_UNIT, parse_length_mm

Value = object

MOST_MM = 1e7
"""Longer lengths are slips: ten kilometres."""

MOST_BYTES = 10_000_000
"""Larger files are refused: profiles and jobs are written by hand."""


def read_toml(path: Path, error: type[FlatprepError] = ProfileError) -> dict[str, Value]:
    """Read a TOML file.

    Raises
    ------
    FlatprepError
        Of class `error`: when the file is missing, unreadable, too large, not UTF-8 or not TOML (with the line).
    """
    try:
        if path.exists() and not path.is_file():
            raise error(f"{path}: is no file", "name the TOML file itself")
        if path.stat().st_size > MOST_BYTES:
            raise error(f"{path}: is larger than {MOST_BYTES // 1_000_000} MB", "that is no profile or job")
        return tomllib.loads(path.read_bytes().decode("utf-8-sig").replace("\r\n", "\n"))
    except UnicodeDecodeError as err:
        raise error(f"{path}: is not UTF-8 text (byte {err.start})", "save it as UTF-8") from None
    except ValueError as err:  # TOMLDecodeError, or a number of thousands of digits
        raise error(f"{path}: is not TOML: {err}", "correct that line; texts stand in double quotes") from None
    except FileNotFoundError:
        raise error(f"{path}: no such file", "check the path") from None
    except RecursionError:
        raise error(f"{path}: is nested too deeply", "write it flatter") from None
    except OSError as err:
        raise error(f"{path}: cannot be read ({err.strerror or err})", "check the path and its rights") from None


@dataclass(frozen=True, slots=True)
class Table:
    """One table of a TOML file.

    Attributes
    ----------
    data : mapping
        The table as read.
    file : str
        Shown in messages.
    where : str
        The table's place in the file, such as ``part 2 (leaf)``; empty at the top.
    error : type
        Class of the errors raised.
    """

    data: Mapping[str, Value]
    file: str
    where: str = ""
    error: type[FlatprepError] = ProfileError

    def only(self, keys: Iterable[str]) -> "Table":
        """Raise for the first key that is not among `keys`, naming the nearest; else return the table itself.

        Asked first, so that a misspelt key is named as such and not reported as missing.
        """
        known = sorted(keys)
        for key in self.data:
            if key not in known:
                raise self.error(
                    f"{self.place}: unknown key {key} = {shown(self.data[key])}",
                    f"{did_you_mean(key, known)} (allowed here: {', '.join(known)})",
                )
        return self

    @property
    def place(self) -> str:
        """File and place in it, for messages."""
        return f"{self.file}: {self.where}" if self.where else self.file

    def fail(self, key: str, allowed: str, remedy: str = "") -> FlatprepError:
        """Return (not raise) the error for the value of `key`, which must be `allowed`."""
        value = shown(self.data[key]) if key in self.data else "missing"
        return self.error(f"{self.place}: {key} = {value}: must be {allowed}", remedy)

    def need(self, key: str, allowed: str) -> FlatprepError:
        """Return (not raise) the error for a key that has to be there."""
        return self.error(f"{self.place}: {key} is missing", f"add {key} = {allowed}")

    def has(self, key: str) -> bool:
        """Tell whether the key is there."""
        return key in self.data

    def get(self, key: str) -> Value | None:
        """Return the raw value, or None."""
        return self.data.get(key)

    def text(self, key: str, default: str | None = None) -> str:
        """Return a text; without a default it must be there and not be empty."""
        value = self.get(key)
        if value is None and default is not None:
            return default
        if value is None:
            raise self.need(key, '"..."')
        if not isinstance(value, str) or (default is None and not value.strip()):
            raise self.fail(key, 'a text in quotes, such as "..."')
        return printable(value)

    def optional_text(self, key: str) -> str | None:
        """Return a text, or None where the key is not there."""
        return self.text(key, "") if self.has(key) else None

    def number(
        self, key: str, default: float | None = None, *, least: float | None = None, above: float | None = None
    ) -> float:
        """Return a finite number of at least `least` (or more than `above`)."""
        value = self.get(key)
        if value is None and default is not None:
            return default
        if value is None:
            raise self.need(key, "a number")
        return self.checked(key, value, least=least, above=above)

    def optional_number(self, key: str, *, least: float | None = None, above: float | None = None) -> float | None:
        """Return a number, or None where the key is not there."""
        return self.number(key, least=least, above=above) if self.has(key) else None

    def checked(self, key: str, value: Value, *, least: float | None = None, above: float | None = None) -> float:
        """Return `value` as a float if it is a finite number in range, else raise for `key`."""
        allowed = "a number" + (f" of {least:g} or more" if least is not None else "")
        allowed += f" above {above:g}" if above is not None else ""
        if isinstance(value, bool) or not isinstance(value, int | float):
            raise self.fail(key, allowed)
        try:
            number = float(value)
        except OverflowError:
            raise self.fail(key, allowed) from None
        low = (least is not None and number < least) or (above is not None and number <= above)
        if not isfinite(number) or low:
            raise self.fail(key, allowed)
        return number

    def length_mm(
        self,
        key: str,
        default: float | None = None,
        *,
        unit: str = "mm",
        least: float | None = None,
        above: float | None = None,
    ) -> float:
        """Return a length in mm: a number in `unit`, or a text with its own unit, such as ``"1/4in"``."""
        value = self.get(key)
        if value is None and default is not None:
            return default
        if value is None:
            raise self.need(key, 'a length, such as 3 or "1/8in"')
        return self.checked_length_mm(key, value, unit=unit, least=least, above=above)

    def checked_length_mm(
        self, key: str, value: Value, *, unit: str = "mm", least: float | None = None, above: float | None = None
    ) -> float:
        """Return `value` as millimetres if it is a length in range, else raise for `key`."""
        if isinstance(value, str):
            try:
                length = parse_length_mm(value, unit)
            except FlatprepError:
                raise self.fail(key, 'a length: a number, or a text such as "3mm", "0.125in", "1/8in"') from None
        else:
            length = self.checked(key, value) * MM_PER_UNIT[unit]
        if abs(length) > MOST_MM:
            raise self.fail(key, "a length of 10 km at the most")
        return self.checked(key, length, least=least, above=above)

    def integer(self, key: str, default: int | None = None, *, least: int = 0, most: int = 1_000_000) -> int:
        """Return a whole number in a range."""
        value = self.get(key)
        if value is None and default is not None:
            return default
        if value is None:
            raise self.need(key, "a whole number")
        if isinstance(value, bool) or not isinstance(value, int) or not least <= value <= most:
            raise self.fail(key, f"a whole number from {least} to {most}")
        return value

    def flag(self, key: str, *, default: bool = False) -> bool:
        """Return true or false."""
        value = self.get(key)
        if value is None:
            return default
        if not isinstance(value, bool):
            raise self.fail(key, "true or false")
        return value

    def optional_flag(self, key: str) -> bool | None:
        """Return true or false, or None where the key is not there."""
        return self.flag(key) if self.has(key) else None

    def choice(self, key: str, allowed: Sequence[str], default: str | None = None) -> str:
        """Return one of the allowed words."""
        value = self.get(key)
        listed = ", ".join(f'"{word}"' for word in allowed)
        if value is None and default is not None:
            return default
        if value is None:
            raise self.need(key, f"one of {listed}")
        if not isinstance(value, str) or value not in allowed:
            close = nearest(value, allowed, 1) if isinstance(value, str) else ()
            raise self.fail(key, f"one of {listed}", f'did you mean "{close[0]}"?' if close else "")
        return value

    def texts(self, key: str) -> tuple[str, ...]:
        """Return a list of texts; empty where the key is not there."""
        value = self.get(key)
        if value is None:
            return ()
        if not isinstance(value, list) or not all(isinstance(item, str) for item in value):
            raise self.fail(key, 'a list of texts, such as ["a", "b"]')
        return tuple(value)

    def numbers(self, key: str, *, count: int | None = None, least: float | None = None) -> tuple[float, ...]:
        """Return a list of numbers (`count` of them where that is given); empty where the key is not there."""
        value = self.get(key)
        if value is None:
            return ()
        if not isinstance(value, list) or (count is not None and len(value) != count):
            raise self.fail(key, f"a list of {count} numbers" if count else "a list of numbers")
        return tuple(self.checked(key, item, least=least) for item in value)

    def pairs(self, key: str) -> tuple[tuple[float, float], ...]:
        """Return a list of pairs of numbers, such as points; empty where the key is not there."""
        value = self.get(key)
        if value is None:
            return ()
        shape = isinstance(value, list) and all(isinstance(row, list) and len(row) == 2 for row in value)
        if not isinstance(value, list) or not shape:
            raise self.fail(key, "a list of pairs of numbers, such as [[0, 1.5], [3, 2]]")
        return tuple((self.checked(key, a), self.checked(key, b)) for a, b in value)

    def table(self, key: str) -> "Table | None":
        """Return a table inside this one, or None."""
        value = self.get(key)
        if value is None:
            return None
        if not isinstance(value, dict):
            raise self.fail(key, f"a table, written [{key}]")
        return Table(value, self.file, self._inside(key), self.error)

    def tables(self, key: str) -> tuple["Table", ...]:
        """Return a list of tables, numbered from 1 in messages; empty where the key is not there."""
        value = self.get(key)
        if value is None:
            return ()
        if not isinstance(value, list) or not all(isinstance(item, dict) for item in value):
            raise self.fail(key, f"a list of tables, each written [[{key}]]")
        return tuple(Table(item, self.file, self._inside(f"{key} {n}"), self.error) for n, item in enumerate(value, 1))

    def named_tables(self, key: str) -> dict[str, "Table"]:
        """Return the tables under ``[key.NAME]`` by name."""
        outer = self.table(key)
        if outer is None:
            return {}
        inner = {name: outer.table(name) for name in outer.data}
        return {name: table for name, table in inner.items() if table is not None}

    def _inside(self, key: str) -> str:
        return f"{self.where}, {key}" if self.where else key


def shown(value: Value) -> str:
    """Return a value as it stands in the file, on one line, cut short where it is long."""
    text = _written(value)
    return text if len(text) <= 60 else text[:57] + "..."


def _written(value: Value) -> str:
    if isinstance(value, bool):
        return str(value).lower()
    if isinstance(value, str):
        return '"' + value[:100].replace("\n", "\\n").replace("\r", "\\r") + '"'
    if isinstance(value, list):
        return "[" + ", ".join(map(_written, value[:20])) + "]"
    if isinstance(value, dict):
        return "{ " + ", ".join(f"{key} = {_written(item)}" for key, item in list(value.items())[:20]) + " }"
    try:
        return str(value)
    except ValueError:  # a whole number of thousands of digits
        return "a huge number"
