"""Which of the numbers in a text are values of the field, and which word beside them speaks of which number."""

from __future__ import annotations

from dataclasses import dataclass, field

from extract.band import condition, joined
from extract.fields import Field
from extract.groups import Group, Item
from extract.model import When
from extract.tokens import Token

_SPEAKING = frozenset({"bound", "request", "standard", "recommended", "from", "years", "mode"})
# Between a number without a unit and the number whose unit it shares stands nothing but these.
_LIST_MARKS = frozenset(
    {"sep", "or", "open", "close", "bound", "standard", "compare", "to", "unit", "slash", "number", "pm", "line"}
    | {"years", "equals", "colon", "mode", "from", "series", "recommended"}
)  # fmt: skip


@dataclass(slots=True)
class Amount:
    """A group that is a value of the field, with everything the text says of it. `position` counts the items."""

    group: Group
    position: int
    bound: str | None = None
    when: When = When()
    request: bool = False
    standard: bool = False
    best: bool = False
    recommended: bool = False
    doubts: list[str] = field(default_factory=list)
    low: float = 0.0
    high: float | None = None
    below: float | None = None

    @property
    def printed_unit(self) -> Token | None:
        """The unit printed at its first number, or at its second."""
        own = None if self.group.percent else self.group.high_unit
        return self.group.low_unit or own


# Quantities that change with drive or temperature: "±1 ppm from 1 to 100 µW" states no drive level.
_SHIFTS = frozenset({"relative", "resistance"})


def own_amounts(items: list[Item], pieces: list[Token], row: Field) -> list[Amount]:
    """The groups that are values of the field: their unit is its own or missing, and no condition names them."""
    found: list[Amount] = []
    of_others = False
    for position, item in enumerate(items):
        group = item.group
        if group is None:
            continue
        if group.foreign in _SHIFTS and not found:
            of_others = True
            if row.name == "drive_level_uw":
                return []
        if group.foreign is not None or group.low.glued or (group.high is not None and group.high.glued):
            continue
        if group.before.startswith("symbol") or (group.before == "at" and (found or of_others) and not group.bound):
            continue
        if group.before == "except" and found:
            continue
        found.append(Amount(group, position, bound=group.bound, doubts=list(group.doubts)))
    places = [(amount.group.start, amount.group.end) for amount in found if amount.printed_unit]
    if not places:
        return found
    places += [(at, at + 1) for at, piece in enumerate(pieces) if piece.kind == "unit" and piece.meaning == "free"]
    return [a for a in found if a.printed_unit or any(_joined_by_marks(a.group, place, pieces) for place in places)]


def _joined_by_marks(group: Group, place: tuple[int, int], pieces: list[Token]) -> bool:
    (_, end), (start, _) = sorted([(group.start, group.end), place])
    return all(piece.kind in _LIST_MARKS for piece in pieces[end:start])


def attach(items: list[Item], amounts: list[Amount], row: Field) -> None:
    """Give every bound word, condition, mode, year count and "on request" to the amounts that it speaks of."""
    if not amounts:
        return
    own = {amount.position for amount in amounts}
    for position, item in enumerate(items):
        if item.word is not None and item.word.kind in _SPEAKING and not _of_others(items, position):
            if item.word.kind == "bound" and _behind_other_property(items, position, own):
                continue
            for amount in _targets(items, amounts, position):
                _say(amount, item.word)
        elif item.group is not None and position not in own and item.group.before != "except":
            when = condition(item.group, row.name)
            if when != When():
                for amount in _targets(items, amounts, position):
                    amount.when = joined(amount.when, when)


def _behind_other_property(items: list[Item], position: int, own: set[int]) -> bool:
    """Whether a bound stands right behind another property's amount: "CL 8 pF ±10 ppm 60 Ω max" limits no load."""
    before = items[position - 1] if position else None
    if before is not None and before.word is not None and before.word.kind == "word":
        return any(character.isdigit() for character in before.word.text) and any(at < position - 1 for at in own)
    group = before.group if before is not None else None
    if group is None or position - 1 in own or group.before == "at":
        return False
    labelled = group.low.glued or group.before.startswith("symbol")
    return (labelled or group.foreign in _PROPERTIES) and any(at < position - 1 for at in own)


_PROPERTIES = frozenset({"relative", "resistance", "capacitance"})


def _of_others(items: list[Item], position: int) -> bool:
    """Whether "on request" speaks of no value printed: "8 pF (others on request)", "18 pF, series on request"."""
    item = items[position]
    if item.word is None or item.word.kind != "request":
        return False
    words = [each.word.kind for each in items if each.segment == item.segment and each.word is not None]
    return "others" in words or "series" in words


def _say(amount: Amount, word: Token) -> None:
    if word.kind == "bound":
        amount.bound = amount.bound or word.meaning
    elif word.kind == "request":
        amount.request = True
    elif word.kind == "standard":
        amount.standard = True
    elif word.kind == "recommended":
        amount.recommended = True
    elif word.kind == "from":
        amount.best = amount.group.shape in ("pm", "single")
    elif word.kind == "years":
        amount.when = joined(When(years=word.value), amount.when)
    elif word.kind == "mode":
        amount.when = joined(When(mode=word.meaning), amount.when)


def _sort_of(item: Item) -> str:
    return item.word.kind if item.word is not None else "condition" if item.group and item.group.foreign else ""


def _targets(items: list[Item], amounts: list[Amount], position: int) -> list[Amount]:
    """The amounts that the item at `position` speaks of.

    Of its own segment (between commas, brackets, lines) the only one, or of several the one after it where such words
    stand first there, else the one before. Alone in its segment: those that follow on its line where nothing precedes
    it there, else the last one before, else the next.
    """
    item, sort = items[position], _sort_of(items[position])
    if sort == "from":
        return [amount for amount in amounts if amount.position > position][:1]
    own = [amount for amount in amounts if items[amount.position].segment == item.segment]
    if len(own) == 1:
        return own
    return _of_several(items, own, position, sort) if own else _of_none(items, amounts, position, sort)


def _of_several(items: list[Item], own: list[Amount], position: int, sort: str) -> list[Amount]:
    """The one after the word where such words stand first in the segment, else the one before it."""
    segment = items[position].segment
    first = next(i for i, each in enumerate(items) if each.segment == segment and _sort_of(each) == sort)
    if first < own[0].position:
        return [amount for amount in own if amount.position > position][:1]
    return [amount for amount in own if amount.position < position][-1:]


def _of_none(items: list[Item], amounts: list[Amount], position: int, sort: str) -> list[Amount]:
    """No amount in the word's own segment: the last one before it, or those that follow it on its line or after."""
    before = [amount for amount in amounts if amount.position < position]
    after = [amount for amount in amounts if amount.position > position]
    follows = items[position + 1].word if position + 1 < len(items) else None
    if follows is not None and follows.kind == "colon" and after:
        return _until_next(items, after, position, sort)
    same_line = [amount for amount in before if items[amount.position].line == items[position].line]
    if same_line or sort in ("request", "standard"):
        return same_line[-1:]
    if not before or _value_follows_on_line(items, after, items[position].line) or (after and _told(before[-1], sort)):
        return _until_next(items, after, position, sort)
    return before[-1:]


def _told(amount: Amount, sort: str) -> bool:
    """Whether the amount has its mode or years already, so that another of that sort begins what follows."""
    return (sort == "mode" and amount.when.mode is not None) or (sort == "years" and amount.when.years is not None)


def _value_follows_on_line(items: list[Item], after: list[Amount], line: int) -> bool:
    return any(items[amount.position].line == line for amount in after)


def _until_next(items: list[Item], after: list[Amount], position: int, sort: str) -> list[Amount]:
    """A mode, band or year count at the head speaks of all up to the next of its sort; a bound of the next number."""
    if sort in ("bound", "recommended"):
        return after[:1]
    end = next((i for i in range(position + 1, len(items)) if _sort_of(items[i]) == sort), len(items))
    return [amount for amount in after if amount.position < end]


def share_years(amounts: list[Amount]) -> None:
    """One year count in the text holds for its typical and its limit alike: "±1 ppm/year typ., ±3 ppm max."."""
    stated = {amount.when.years for amount in amounts} - {None}
    if len(stated) == 1:
        for amount in amounts:
            amount.when = joined(When(years=next(iter(stated))), amount.when)
