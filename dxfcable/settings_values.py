"""Values of a settings page taken by kind: what is no such value is refused by its key."""

from __future__ import annotations

import math
from dataclasses import fields
from typing import TYPE_CHECKING, TypeVar

from dxfcable.settings_checks import refusal

if TYPE_CHECKING:
    from collections.abc import Mapping

Table = TypeVar("Table")


def table(name: str, page: Mapping[str, object], default: Table, prefix: str = "") -> Table:
    """Override the fields of a table's defaults by what the page says, types checked.

    Parameters
    ----------
    name : str
        Of the table; absent from the page it keeps its defaults.
    page : mapping
        What holds the table.
    default : dataclass
        A value of each field says of which kind it is.
    prefix : str
        Of the table's name in refusals.

    Raises
    ------
    SettingsError
        Naming the key that is not known or has another kind of value.
    """
    content = page.get(name, {})
    keys = [f.name for f in fields(default)]  # type: ignore[arg-type]  # each table is a dataclass
    if not isinstance(content, dict):
        raise refusal(prefix + name, "is a table", f"Known keys: {', '.join(keys)}.")
    values = {key: getattr(default, key) for key in keys}
    for key, value in content.items():
        where = f"{prefix}{name}.{key}"
        if key not in keys:
            raise refusal(where, "is no key of the settings", f"Known: {', '.join(keys)}.")
        values[key] = _value(where, value, values[key])
    return type(default)(**values)


def _value(where: str, value: object, default: object) -> object:
    """Check a value against the kind of its default and freeze it."""
    match default:
        case bool():
            if isinstance(value, bool):
                return value
            raise refusal(where, f"is {value!r}", "Write true or false.")
        case str():
            if isinstance(value, str):
                return value
            raise refusal(where, f"is {value!r}", "Write a text in quotes.")
        case int():
            if isinstance(value, int) and not isinstance(value, bool):
                return value
            raise refusal(where, f"is {value!r}", "Write a whole number.")
        case float():
            return number(where, value)
        case (float(), float()):
            if isinstance(value, list) and len(value) == 2:
                return (number(where, value[0]), number(where, value[1]))
            raise refusal(
                where, f"is {value!r}", "Write two numbers in brackets, as [3.0, 1000.0]."
            )
        case (str(), *_):
            if isinstance(value, list) and all(isinstance(v, str) for v in value):
                return tuple(value)
            raise refusal(where, f"is {value!r}", "Write texts in brackets.")
        case _:
            if isinstance(value, dict) and all(isinstance(v, str) for v in value.values()):
                return tuple(value.items())
            raise refusal(where, f"is {value!r}", 'Write { DL = "D" } and the like.')


def number(where: str, value: object) -> float:
    """Take a finite number that is not negative: no setting has use for another."""
    if isinstance(value, int | float) and not isinstance(value, bool):
        found = float(value)
        if math.isfinite(found) and found >= 0:
            return found
    raise refusal(where, f"is {value!r}", "Write a number of zero or more.")
