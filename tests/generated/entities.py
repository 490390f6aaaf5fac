"""Entities as tags, for every version: with or without handles, owners, subclass markers."""

from __future__ import annotations

import random
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from tests.generated.writing import HAS_LINEWEIGHT, HAS_LWPOLYLINE, Tags, is_modern, number

if TYPE_CHECKING:
    from collections.abc import Sequence

Point = tuple[float, float]
Body = tuple[str, Tags]


def point(at: Point, code: int = 10) -> Tags:
    """Return the three tags of a point."""
    return [(code, number(at[0])), (code + 10, number(at[1])), (code + 20, "0.0")]


@dataclass(slots=True, kw_only=True)
class Maker:
    """Makes records for one drawing and counts its handles.

    `owner` is the handle of *Model_Space, "" leaves owners out. `handle_last` puts the
    handle behind the layer. `reserved` handles are never given out.
    """

    version: str
    handles: bool = True
    owner: str = ""
    next_handle: int = 0x40
    handle_last: bool = False
    reserved: frozenset[int] = frozenset()
    rng: random.Random = field(default_factory=lambda: random.Random(0))

    @property
    def modern(self) -> bool:
        """Whether records have subclass markers and owners."""
        return is_modern(self.version)

    def handle(self) -> str:
        """Return the next free handle."""
        while self.next_handle in self.reserved:
            self.next_handle += 1
        value = self.next_handle
        self.next_handle += 1
        return f"{value:X}"

    def identity(self, handle: str | None = None) -> Tags:
        """Return the handle tag of a new record, none where the drawing has no handles."""
        if not self.handles:
            return []
        return [(5, handle or self.handle())]

    def marker(self, name: str) -> Tags:
        """Return a subclass marker where the version has them."""
        return [(100, name)] if self.modern else []

    def entity(
        self,
        kind: str,
        layer: str,
        bodies: Sequence[Body],
        *,
        owner: str | None = None,
        before_owner: Tags | None = None,
        common: Tags | None = None,
        handle: str | None = None,
    ) -> Tags:
        """Return one record: `bodies` are its subclasses, `common` stands before the layer."""
        tags: Tags = [(0, kind)]
        identity = self.identity(handle)
        if not self.handle_last:
            tags += identity
        tags += before_owner or []
        to = self.owner if owner is None else owner
        if self.modern and self.handles and to:
            tags.append((330, to))
        tags += self.marker("AcDbEntity") + (common or []) + [(8, layer)]
        if self.handle_last:
            tags += identity
        for name, body in bodies:
            tags += self.marker(name) + body
        return tags

    # --- simple entities ---

    def line(self, a: Point, b: Point, layer: str = "0") -> Tags:
        """Return a LINE."""
        return self.entity("LINE", layer, [("AcDbLine", point(a) + point(b, 11))])

    def circle(self, at: Point, radius: float, layer: str = "0") -> Tags:
        """Return a CIRCLE."""
        return self.entity("CIRCLE", layer, [("AcDbCircle", [*point(at), (40, number(radius))])])

    def arc(self, at: Point, radius: float, layer: str = "0") -> Tags:
        """Return an ARC."""
        circle: Body = ("AcDbCircle", [*point(at), (40, number(radius))])
        return self.entity("ARC", layer, [circle, ("AcDbArc", [(50, "10.0"), (51, "200.0")])])

    def dot(self, at: Point, layer: str = "0") -> Tags:
        """Return a POINT."""
        return self.entity("POINT", layer, [("AcDbPoint", point(at))])

    def text(self, words: str, at: Point, height: float, layer: str = "0") -> Tags:
        """Return a TEXT, aligned left on its base line."""
        body = [*point(at), (40, number(height)), (1, words)]
        bodies: list[Body] = [("AcDbText", body)]
        if self.modern:
            bodies.append(("AcDbText", []))
        return self.entity("TEXT", layer, bodies)

    def corners(self, kind: str, at: Point, size: float, layer: str = "0") -> Tags:
        """Return a SOLID or a 3DFACE."""
        x, y = at
        body = point(at) + point((x + size, y), 11)
        body += point((x, y + size), 12) + point((x + size, y + size), 13)
        return self.entity(kind, layer, [("AcDbTrace" if kind == "SOLID" else "AcDbFace", body)])

    # --- entities of several records ---

    def polyline(self, points: Sequence[Point], layer: str = "0") -> list[Tags]:
        """Return an LWPOLYLINE, or POLYLINE to SEQEND where the version has none."""
        if self.version >= HAS_LWPOLYLINE:
            flat: Tags = [(c, number(v)) for p in points for c, v in zip((10, 20), p, strict=True)]
            head: Tags = [(90, str(len(points))), (70, "0")]
            return [self.entity("LWPOLYLINE", layer, [("AcDbPolyline", head + flat)])]
        return self.old_polyline(points, layer)

    def old_polyline(self, points: Sequence[Point], layer: str = "0") -> list[Tags]:
        """Return POLYLINE, VERTEX each, SEQEND."""
        head: Tags = [(66, "1"), *point((0.0, 0.0)), (70, "0")]
        own = self.handle() if self.handles else ""
        first = self.entity("POLYLINE", layer, [("AcDb2dPolyline", head)], handle=own or None)
        result = [first]
        for at in points:
            bodies: list[Body] = [("AcDbVertex", []), ("AcDb2dVertex", [*point(at), (70, "0")])]
            result.append(self.entity("VERTEX", layer, bodies, owner=own))
        return [*result, self.entity("SEQEND", layer, [], owner=own)]

    def insert(
        self,
        name: str,
        at: Point,
        layer: str = "0",
        attributes: Sequence[tuple[str, str]] = (),
        height: float = 0.25,
    ) -> list[Tags]:
        """Return an INSERT, with ATTRIBs and SEQEND where it has attributes."""
        own = self.handle() if self.handles else ""
        follows: Tags = [(66, "1")] if attributes else []
        body: Tags = [*follows, (2, name), *point(at)]
        head = self.entity("INSERT", layer, [("AcDbBlockReference", body)], handle=own or None)
        result = [head]
        for k, (tag, value) in enumerate(attributes):
            where = (at[0], at[1] - 1.6 * height * k)
            text: Tags = [*point(where), (40, number(height)), (1, value)]
            bodies: list[Body] = [("AcDbText", text), ("AcDbAttribute", [(2, tag), (70, "0")])]
            result.append(self.entity("ATTRIB", layer, bodies, owner=own))
        if attributes:
            result.append(self.entity("SEQEND", layer, [], owner=own))
        return result

    def hatch(self, at: Point, size: float, layer: str = "0") -> Tags:
        """Return a solid HATCH of four corners (R2000 and later), else a SOLID."""
        if self.version < HAS_LINEWEIGHT:
            return self.corners("SOLID", at, size, layer)
        x, y = at
        ring = [(x, y), (x + size, y), (x + size, y + size), (x, y + size)]
        flat: Tags = [(c, number(v)) for p in ring for c, v in zip((10, 20), p, strict=True)]
        body: Tags = [*point((0.0, 0.0)), (210, "0.0"), (220, "0.0"), (230, "1.0"), (2, "SOLID")]
        body += [(70, "1"), (71, "0"), (91, "1"), (92, "3"), (72, "0"), (73, "1"), (93, "4")]
        body += [*flat, (97, "0"), (75, "0"), (76, "1"), (98, "0")]
        return self.entity("HATCH", layer, [("AcDbHatch", body)])

    def mtext(self, words: str, at: Point, height: float, layer: str = "0") -> Tags:
        """Return an MTEXT (R13 and later), else a TEXT."""
        if not self.modern:
            return self.text(words, at, height, layer)
        body: Tags = [*point(at), (40, number(height)), (41, "10.0"), (71, "1"), (1, words)]
        return self.entity("MTEXT", layer, [("AcDbMText", body)])


def filler(maker: Maker, count: int, layers: Sequence[str], block: str | None) -> list[Tags]:
    """Return `count` entities of mixed types, strewn about the origin."""
    rng = maker.rng
    result: list[Tags] = []
    for k in range(count):
        at = (round(rng.uniform(-60, 90), 4), round(rng.uniform(-40, 50), 4))
        to = (round(at[0] + rng.uniform(-9, 9), 4), round(at[1] + rng.uniform(-9, 9), 4))
        size, layer = round(rng.uniform(0.2, 3.0), 3), rng.choice(list(layers))
        kind = (k + rng.randrange(2)) % 11
        if kind == 0:
            result.append(maker.line(at, to, layer))
        elif kind == 1:
            result.append(maker.corners("3DFACE", at, size, layer))
        elif kind == 2:
            result.append(maker.text(rng.choice(WORDS), at, 0.25, layer))
        elif kind == 3:
            result += maker.polyline([at, to, (to[0] + 2.0, to[1])], layer)
        elif kind == 4:
            result += maker.old_polyline([at, to], layer)
        elif kind == 5 and block is not None:
            tags = [("TAG", rng.choice(WORDS))] if rng.random() < 0.5 else []
            result += maker.insert(block, at, layer, tags)
        elif kind == 6:
            result.append(maker.circle(at, size, layer))
        elif kind == 7:
            result.append(maker.arc(at, size, layer))
        elif kind == 8:
            result.append(maker.hatch(at, size, layer))
        elif kind == 9:
            result.append(maker.mtext(rng.choice(WORDS), at, 0.3, layer))
        else:
            result.append(maker.dot(at, layer))
    return result


WORDS = ("ROOM 12", "see detail 4", "12 kN", "SECTION A-A", "8", "+0", "EL 101.25", "50%%c", "W")
