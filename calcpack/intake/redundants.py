"""The unknowns that the engineer wants released, such as ``moment B left`` or ``reaction C``."""

from __future__ import annotations

from collections.abc import Iterator

from calcpack.intake.beam import Outline
from calcpack.intake.reading import Reading, nearest
from calcpack.intake.values import alternatives
from calcpack.model.beam import Face, Support
from calcpack.model.request import Effect, EffectKind

_KINDS: tuple[EffectKind, ...] = ("moment reaction", "moment", "reaction")
_FACES: tuple[Face, ...] = ("left", "right")

_Meaning = tuple[EffectKind, str, Face | None]


def read_redundants(reading: Reading, outline: Outline) -> tuple[Effect, ...] | None:
    """The redundants in the order of the file; None where they are chosen by rule.

    Whether they are as many as the beam needs, and leave it stable, is not looked at.
    """
    if not reading.given("beam.redundants"):
        return None
    found: dict[Effect, str] = {}
    for path in reading.items("beam.redundants"):
        effect = _redundant(reading, outline, path)
        if effect is not None and found.setdefault(effect, path) != path:
            reading.refuse(path, f"must differ from {found[effect]}")
    return tuple(found)


def _redundant(reading: Reading, outline: Outline, path: str) -> Effect | None:
    text = reading.value(path)
    if text is None:
        return None
    supports = {support.name: support for support in outline.beam.supports}
    meanings = list(_meanings(text))
    known = [meaning for meaning in meanings if meaning[1] in supports]
    if not meanings:
        reading.refuse(path, f"must be {alternatives(_KINDS)}, then the name of a support")
    elif len(known) > 1:
        kinds = " and ".join(f"a {kind} at {name}" for kind, name, _ in known)
        reading.refuse(path, f"must not mean both {kinds}")
    elif known:
        kind, name, face = known[0]
        needs = _fault(outline, supports[name], kind, face)
        if not needs:
            return Effect(kind, name, supports[name].at, face, outline.beam.tags[name])
        reading.refuse(path, needs)
    elif outline.whole:
        near = nearest(meanings[0][1], supports, 3)
        reading.refuse(path, f"must name a support; {near}")
    return None


def _meanings(text: str) -> Iterator[_Meaning]:
    """What a text may mean, whatever the supports are called: their names may hold any words."""
    for kind in _KINDS:
        name = text.removeprefix(f"{kind} ")
        if name != text:
            for face in _FACES:
                if name.endswith(f" {face}"):
                    yield kind, name.removesuffix(f" {face}"), face
            yield kind, name, None


def _fault(outline: Outline, support: Support, kind: EffectKind, face: Face | None) -> str:
    """What is needed in place of such an unknown at the support; "" where it exists."""
    beam = outline.beam
    if kind == "moment":
        released = any(release.at == support.at for release in beam.releases)
        if released or not 0 < support.at < beam.length:
            return "must be at an interior support without a release, for a moment"
        if support.holds_rotation and face is None:
            return f'must end in "left" or "right": {support.name} holds rotation'
        if face and not support.holds_rotation:
            return f'must be without "{face}": the moment at {support.name} has one value'
    elif face:
        return f'must be without "{face}": a {kind} has one value'
    elif not (support.holds_vertical if kind == "reaction" else support.holds_rotation):
        held = "vertically" if kind == "reaction" else "rotation"
        return f"must be at a support that holds {held}, for a {kind}"
    return ""
