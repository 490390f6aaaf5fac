"""A command that takes texts, paths and flags as they are typed.

Typer converts each value with a validator that it builds at start, and imports a library for
it: about a tenth of the time that `solve` takes on a small drawing, and 12 MB. Texts, paths and
flags need none. Whatever else is typed - a number, an unknown name, nothing at all, a call for
help - goes typer's own way and is answered in typer's own words.
"""

from __future__ import annotations

from pathlib import Path
from types import NoneType
from typing import TYPE_CHECKING, Any, get_args, get_type_hints

from typer.core import TyperCommand, TyperGroup

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping

_MAKERS: dict[object, Callable[[Any], object]] = {
    bool: bool,
    str: str,
    Path: Path,
    list[str]: list,
    list[Path]: lambda typed: [Path(one) for one in typed],
}


class PlainCommand(TyperCommand):
    """A command whose plain values pass no validator."""

    def parse_args(self, ctx: Any, args: list[str]) -> list[str]:
        """Read what was typed into the context, as the class of typer does."""
        values = None
        if self.callback is not None and not ctx.resilient_parsing:
            given, rest, _ = self.make_parser(ctx).parse_args(args=list(args))
            values = None if rest else self._values(self.callback, given)
        if values is None:
            return super().parse_args(ctx, args)
        ctx.params.update(values)  # the others keep their defaults
        return []

    def _values(
        self, callback: Callable[..., object], given: Mapping[str, Any]
    ) -> dict[str, object] | None:
        """Return what was given, None where something is missing or is not plain."""
        for param in self.params:
            if param.callback or param.envvar or (param.required and not given.get(param.name)):
                return None
        kinds = get_type_hints(callback)
        makers = {name: _MAKERS.get(_plain(kinds.get(name))) for name in given}
        if not all(makers.values()):
            return None
        return {name: make(given[name]) for name, make in makers.items() if make}


class PlainGroup(TyperGroup):
    """A group whose own options are looked at only where one is typed."""

    def parse_args(self, ctx: Any, args: list[str]) -> list[str]:
        """Read what was typed into the context, as the class of typer does."""
        if ctx.resilient_parsing or not args or args[0] not in self.commands:
            return super().parse_args(ctx, args)
        own = self.params, self.add_help_option
        self.params, self.add_help_option = [], False
        try:
            return super().parse_args(ctx, args)
        finally:
            self.params, self.add_help_option = own


def _plain(kind: object) -> object:
    """Return a type without "or None"."""
    some = [one for one in get_args(kind) if one is not NoneType]
    return some[0] if len(some) == 1 and NoneType in get_args(kind) else kind
