"""A large drawing for the benchmarks: mixed types, many blocks, one cable."""

from __future__ import annotations

import random

from tests.generated import sections
from tests.generated.cable import CABLE_LAYERS, CableOptions, block, cable_block, cable_layout
from tests.generated.entities import Maker, point
from tests.generated.writing import Codes, Style, Tags, is_modern, number, render

BLOCKS = 200
LAYERS = tuple(f"T{k:02d}" for k in range(24))
BULK_START = 0x10000
KINDS = 10


def big_drawing(
    count: int = 200_000,
    *,
    newline: bytes = b"\n",
    padded: bool = True,
    seed: int = 1,
    version: str = "AC1015",
    layout: CableOptions | None = None,
) -> bytes:
    """Return a drawing of `count` entities and one cable, 24 to 27 MB at 200,000 (LF).

    Parameters
    ----------
    count : int
        How many entities.
    newline : bytes
        Line end.
    padded : bool
        Whether group codes are padded to three places.
    seed : int
        Of places, sizes and layers.
    version : str
        $ACADVER, R13 or later, or AC1009.
    layout : CableOptions or None
        None takes a cable of 24 m at (2000, 2000), beside the other entities.
    """
    options = layout or CableOptions(origin=(2000.0, 2000.0))
    rng = random.Random(seed)
    maker = Maker(version=version, rng=rng, reserved=frozenset({0x1F}))
    codes = Codes.PADDED if padded else Codes.UNPADDED
    style = Style(newline=newline, codes=codes)
    records = {"*Model_Space": "1F", "*Paper_Space": maker.handle()}
    names = [f"PART-{k:03d}" for k in range(BLOCKS)]
    records |= {name: maker.handle() for name in [*names, "TREE", "CABLE-DATA"]}
    handles = sections.Handles(
        model_space="1F",
        paper_space=records["*Paper_Space"],
        layout_block=records["CABLE-DATA"],
        layout_layers=CABLE_LAYERS + LAYERS,
        block_records=records,
    )
    maker.owner = "1F" if is_modern(version) else ""
    own = cable_block(maker, options, records["CABLE-DATA"])
    for name in names:
        content = [maker.line((0.0, 0.0), (1.0, 0.5)), maker.circle((0.5, 0.5), 0.3)]
        own += block(maker, name, content, records[name])
    blocks, _ = sections.blocks_section(maker, frozenset(), handles, own)
    known = list(records) if own else []
    tables = sections.tables(maker, frozenset(), handles, known)
    cable = [tag for record in cable_layout(maker, options) for tag in record]
    objects = sections.objects(maker, frozenset(), []) if maker.modern else []
    opening: Tags = [(0, "SECTION"), (2, "ENTITIES")]
    closing: Tags = [(0, "ENDSEC"), *objects, (0, "EOF")]
    seed_value = f"{BULK_START + 8 * count:X}"
    head = sections.header(maker, frozenset(), seed_value) + tables + blocks + opening
    maker.next_handle = BULK_START
    body = _bulk(maker, count, names, style)
    return render(head, style, rng) + body + render(cable + closing, style, rng)


def _bulk(maker: Maker, count: int, names: list[str], style: Style) -> bytes:
    """Return many entities: each type is rendered once and filled with numbers after that."""
    rng = maker.rng
    patterns = [_pattern(maker, kind, style) for kind in range(KINDS)]
    owner = maker.owner.encode()
    parts = []
    for k in range(count):
        x, y = rng.uniform(0.0, 1500.0), rng.uniform(0.0, 1500.0)
        values = {
            b"h": b"%X" % (BULK_START + 6 * k),
            b"i": b"%X" % (BULK_START + 6 * k + 1),
            b"j": b"%X" % (BULK_START + 6 * k + 2),
            b"k": b"%X" % (BULK_START + 6 * k + 3),
            b"o": owner,
            b"l": LAYERS[rng.randrange(len(LAYERS))].encode(),
            b"n": names[k % len(names)].encode(),
            b"x": b"%.2f" % x,
            b"y": b"%.2f" % y,
            b"u": b"%.2f" % (x + rng.uniform(-8.0, 8.0)),
            b"v": b"%.2f" % (y + rng.uniform(-8.0, 8.0)),
        }
        parts.append(patterns[k % KINDS] % values)
    return b"".join(parts)


_FIXED = (11.0, 12.0, 21.0, 22.0)


def _pattern(maker: Maker, kind: int, style: Style) -> bytes:
    """Return one type of entity as bytes with places for its numbers."""
    model = Maker(version=maker.version, owner="%(o)s", next_handle=1)
    x, y, u, v = _FIXED
    recipes = (
        lambda: [model.line((x, y), (u, v), "%(l)s")],
        lambda: [model.circle((x, y), 1.5, "%(l)s")],
        lambda: [model.arc((x, y), 1.25, "%(l)s")],
        lambda: [model.text("NOTE 8", (x, y), 0.25, "%(l)s")],
        lambda: model.polyline([(x, y), (u, v)], "%(l)s"),
        lambda: [model.dot((x, y), "%(l)s")],
        lambda: model.insert("%(n)s", (x, y), "%(l)s"),
        lambda: [_face(model)],
        lambda: [_face(model, "SOLID")],
        lambda: [model.line((u, y), (x, v), "%(l)s")],
    )
    fill: dict[str, str] = dict(zip("1234", ("%(h)s", "%(i)s", "%(j)s", "%(k)s"), strict=True))
    places = {number(x): "%(x)s", number(y): "%(y)s", number(u): "%(u)s", number(v): "%(v)s"}
    tags: Tags = []
    for record in recipes[kind]():
        for code, value in record:
            text = str(value)
            if code in (5, 330):
                text = fill.get(text, text)
            tags.append((code, places.get(text, text)))
    return render(tags, style, maker.rng)


def _face(model: Maker, kind: str = "3DFACE") -> Tags:
    """Return a face of four corners."""
    x, y, u, v = _FIXED
    body = point((x, y)) + point((u, y), 11) + point((x, v), 12) + point((u, v), 13)
    name = "AcDbTrace" if kind == "SOLID" else "AcDbFace"
    return model.entity(kind, "%(l)s", [(name, body)])
