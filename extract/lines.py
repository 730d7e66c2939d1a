"""Lines outside tables -> entries, ordering keys and texts."""

from __future__ import annotations

import math
import re
from collections.abc import Iterator, Sequence
from dataclasses import replace
from functools import cache
from itertools import pairwise

from extract import wording
from extract.candidates import has_unit, read
from extract.conditions import kinds_of
from extract.documents.model import Line
from extract.dumps import column_dump
from extract.entries import Entry, Item, Key, Piece, Text, Value
from extract.fold import fold
from extract.footnotes import footnote_of, footnotes_in
from extract.heads import is_unit
from extract.keys import choices_in, key_label
from extract.meaning import meaning, part_tokens
from extract.prose import is_label, pair_entries, split_pairs
from extract.streams import Fragments, paragraph, stream_entries
from extract.torn import spaced_rows, torn_rows
from extract.vocabulary import vocabulary


def line_items(lines: Sequence[Line]) -> list[Item]:
    """A run of lines between two tables, read in order."""
    items: list[Item] = []
    index = 0
    lines = _unhyphenated(lines)
    fragments = Fragments(lines)
    while index < len(lines):
        taken = (
            _dump(lines, index, items)
            or _torn(lines, index, items)
            or _key_run(lines, index, items)
            or _stream(lines, index, items, fragments)
            or _cards(lines, index, items)
            or _label_over_value(lines, index, items)
            or _one(lines[index], items)
        )
        index += taken
    return items


_HYPHENATED = re.compile(r"[^\W\d_]{2,}-$")


def _unhyphenated(lines: Sequence[Line]) -> Sequence[Line]:
    """Lines with a label that was broken over two of them put together: "Last-" above "kapazität 6 pF"."""
    if not any(_HYPHENATED.search(line.text) for line in lines):
        return lines
    whole: list[Line] = []
    for line in lines:
        above = whole[-1] if whole else None
        if above is not None and _HYPHENATED.search(above.text) and line.text[:1].islower():
            joined = above.text[:-1] + line.text
            words = joined.split()
            if any(is_label(" ".join(words[:count])) for count in range(1, min(4, len(words)) + 1)):
                first = replace(above.segments[0], text=joined)
                whole[-1] = replace(above, segments=(first,))
                continue
        whole.append(line)
    return whole


def _dump(lines: Sequence[Line], index: int, items: list[Item]) -> int:
    entries, taken = column_dump(lines, index)
    items.extend(_text(line) for line in lines[index : index + taken])
    items.extend(entries)
    return taken


def _torn(lines: Sequence[Line], index: int, items: list[Item]) -> int:
    entries, taken = torn_rows(lines, index)
    if not entries:
        entries, taken = spaced_rows(lines, index)
    items.extend(_text(line) for line in lines[index : index + taken])
    items.extend(entries)
    return taken


def _stream(lines: Sequence[Line], index: int, items: list[Item], fragments: Fragments) -> int:
    """A wrapped paragraph, or a run of broken lines, read as one text; a quoted line of mail is somebody else's."""
    if lines[index].text.lstrip().startswith(">"):
        return 1
    if (count := fragments.count(index)) > 1:
        items.extend(_text(line) for line in lines[index : index + count])
        items.extend(stream_entries(lines[index : index + count], "pair"))
        return count
    count = paragraph(lines, index)
    # A line that lists one part begins what is said of it.
    count = next((at for at in range(1, count) if begins_with_part(lines[index + at].text)), count)
    if count < 2:
        return 0
    run = lines[index : index + count]
    whole = " ".join(line.text for line in run)
    items.append(Text(Piece(whole, run[0].where), segments=tuple(segment for line in run for segment in line.segments)))
    if footnote_of(whole) is None:
        items.extend(stream_entries(run, "prose"))
    return count


def _text(line: Line) -> Text:
    worst = min((segment.confidence for segment in line.segments), default=1.0)
    return Text(Piece(line.text, line.where, worst), line.heading, line.segments)


def _one(line: Line, items: list[Item]) -> int:
    # A part number in the line begins a part, and the line's text belongs to that part: a line that begins with it goes
    # before what it states.
    own = _of_footnotes(line) if _is_footnote(line.text) else list(_entries(line))
    first = begins_with_part(line.text) or speaks_of_all(line.text)
    items.extend([_text(line), *own] if first else [*own, _text(line)])
    return 1


def begins_with_part(text: str) -> bool:
    """Whether a line lists one part: its number first, perhaps numbered, and behind it what it is."""
    plain = without_number(fold(text))
    tokens = part_tokens(plain)
    return bool(tokens) and bool(
        re.match(re.escape(tokens[0]) + r"(?:\s?[:,;–-]|\s\(?\d+(?:[.,]\d+)?\s?[MkK]Hz)", plain)
    )


@cache
def _proposal() -> re.Pattern[str]:
    words = "|".join(map(re.escape, vocabulary().phrases.get("proposal", ())))
    return re.compile(rf"^\s*(?:{words})\.?\s?(?:no\.?\s?)?[A-Z\d]{{1,2}}\s?[:：.)）–-]\s?", re.IGNORECASE)


def without_number(text: str) -> str:
    """A line without the number or letter of its row ("2) ", "Option B: ")."""
    return _proposal().sub("", ROW_NUMBER.sub("", text))


def speaks_of_all(text: str) -> bool:
    """Whether a line says something of all parts named ("All parts: storage -55 to +125 °C")."""
    folded = ROW_NUMBER.sub("", fold(text)).casefold().lstrip(" (")
    return any(
        folded.startswith(word) and not (word[-1].isascii() and folded[len(word) : len(word) + 1].isalpha())
        for word in vocabulary().phrases.get("all_parts", ())
    )


ROW_NUMBER = re.compile(r"^\s*(?:(?:\(?\d{1,2}[.)]|[-•*·])\s+|[一二三四五六七八九十]{1,3}[、.．]\s*)")


def _is_footnote(text: str) -> bool:
    """Whether a line is a footnote and no numbered row; "*1 for CL = 6 pF ..." states nothing of its own."""
    found = footnote_of(text)
    if found is None or begins_with_part(text):
        return False
    pairs = split_pairs(found[1])[0]
    return not pairs or not found[1].lstrip(" -*").startswith(pairs[0][0])


def _of_footnotes(line: Line) -> list[Entry]:
    """What footnotes state by themselves: ranges of temperature under their own label."""
    notes = [note for _, note in footnotes_in(line.text) if _states_a_range(note)]
    return [entry for note in notes for entry in pair_entries(Piece(note, line.where))]


def _states_a_range(note: str) -> bool:
    """Whether a footnote is a label of a temperature range with the range behind it, and no more."""
    labels = wording.find_labels(note)
    label = labels[0] if labels and labels[0].start == 0 else None
    if label is None or label.label.field not in ("operating_temperature_c", "storage_temperature_c"):
        return False
    values = read(note[label.end :], label.label.field)
    return len(values) == 1 and None not in (values[0].min, values[0].max) and len(note) < 60


def _entries(line: Line) -> Iterator[Entry]:
    segments = line.segments
    if len(segments) >= 2 and is_label(segments[0].text) and not _has_pair(segments[1].text):
        yield from _label_and_rest(line)
        return
    for segment in segments:
        yield from pair_entries(segment)


def _has_pair(text: str) -> bool:
    return bool(split_pairs(fold(text))[0])


def _label_and_rest(line: Line) -> Iterator[Entry]:
    """A label and, in the segments behind it, its symbol, values, unit and remarks."""
    label, *rest = line.segments
    symbol, unit = "", ""
    values: list[Value] = []
    for segment in rest:
        if is_unit(segment.text) and values:
            unit = unit or segment.text
        elif not values and not symbol and len(segment.text) <= 8 and is_label(segment.text):
            symbol = segment.text
        else:
            values.append(Value(segment))
    if values:
        piece = Piece(label.text.rstrip(" :："), label.where, label.confidence)
        for each in _as_choices(label.text, values):
            yield Entry(piece, each, unit, symbol, source="pair")


def _as_choices(label: str, values: list[Value]) -> list[tuple[Value, ...]]:
    """Several values side by side, each with its own unit: one text ("8 pF", "12.5 pF"), or a row for each band."""
    known = meaning(label.rstrip(" :：")).label
    if known is None or len(values) < 2 or not all(has_unit(value.piece.text, known.field) for value in values):
        return [tuple(values)]
    if all(_CASE & kinds_of(value.piece.text) for value in values):
        return [(value,) for value in values]
    if any(len(value.piece.text) > 24 or len(read(value.piece.text, known.field)) != 1 for value in values):
        return [tuple(values)]
    worst = min(value.piece.confidence for value in values)
    return [(Value(Piece(", ".join(value.piece.text for value in values), values[0].piece.where, worst)),)]


_CASE = {"frequency_mhz", "mode", "temperature_c", "load_capacitance_pf"}


def _cards(lines: Sequence[Line], index: int, items: list[Item]) -> int:
    """A line of labels side by side and the line of their values, each right below its own."""
    if index + 1 == len(lines):
        return 0
    names, values = lines[index], lines[index + 1]
    if len(names.segments) < 2 or not _one_below_another(names, values):
        return 0
    if index + 2 < len(lines) and _one_below_another(names, lines[index + 2]) and not _names_only(lines[index + 2]):
        # More rows of values make a list.
        return 0
    if not _names_only(names) or any(is_label(each.text) and meaning(each.text).label for each in values.segments):
        return 0
    items.append(_text(names))
    for name, value in zip(names.segments, values.segments, strict=True):
        items.append(Entry(Piece(name.text, name.where, name.confidence), (Value(value),), source="pair"))
    items.append(_text(values))
    return 2


def _names_only(line: Line) -> bool:
    return all(is_label(each.text) and not _holds_its_value(each.text) for each in line.segments)


def _one_below_another(above: Line, below: Line) -> bool:
    """Whether two lines have as many segments, each in the same place across the page."""
    if len(above.segments) != len(below.segments) or above.where.page != below.where.page:
        return False
    for one, other in zip(above.segments, below.segments, strict=True):
        if one.where.box is None or other.where.box is None:
            return False
        if min(one.where.box[2], other.where.box[2]) <= max(one.where.box[0], other.where.box[0]):
            return False
    return True


def _label_over_value(lines: Sequence[Line], index: int, items: list[Item]) -> int:
    """A line that is a label and nothing else, and the lines with its values below it."""
    line = lines[index]
    if len(line.segments) != 1 or not is_label(line.text) or meaning(line.text).value or _holds_its_value(line.text):
        return 0
    if _has_pair(line.text) or line.text.rstrip().endswith("。"):
        # "製造者：..." has its value beside it, and a sentence is no label of what stands below it.
        return 0
    end = index + 1
    label_here = meaning(line.text.strip(" :：")).label
    field = label_here.field if label_here is not None else ""
    while end < len(lines) and (_is_value_line(lines[end]) or _case_first(lines[end].text, field)) and end - index <= 8:
        end += 1
    if end == index + 1 or (end < len(lines) and end - index > 2 and not is_label(lines[end].text) and end - index > 8):
        return 0
    if _is_axis(lines[index + 1 : end]):
        return 0
    items.append(_text(line))
    label = Piece(line.text.rstrip(" :："), line.where)
    if end == index + 2:
        items.append(Entry(label, tuple(Value(segment) for segment in lines[index + 1].segments), source="pair"))
    else:
        below = lines[index + 1 : end]
        items.extend(Entry(label, tuple(Value(segment) for segment in each.segments), source="pair") for each in below)
    return end - index


def _case_first(text: str, field: str) -> bool:
    """Whether a line is a value behind the mode, band or load that it holds for ("3rd overtone: 40 ohm")."""
    before, mark, behind = text.partition(":")
    if not field or not mark or not re.match(r"\s*[<≤>]?\s?\d", fold(behind)) or is_label(before):
        return False
    return has_unit(behind, field) and bool(kinds_of(before) & _CASE)


def _is_axis(lines: Sequence[Line]) -> bool:
    """Whether lines are the numbers beside a graph: three or more bare ones at equal steps."""
    texts = [fold(line.text) for line in lines]
    bare = [float(text) for text in texts if re.fullmatch(r"[-+]?\d+(?:\.\d+)?", text)]
    if len(bare) < 3 or len(bare) < len(texts):
        return False
    step = bare[1] - bare[0]
    return all(math.isclose(after - before, step) for before, after in pairwise(bare))


def _holds_its_value(text: str) -> bool:
    """Whether a label has its amount behind it on the same line ("Tolerance ±30 ppm at 25 °C")."""
    label = meaning(text).label
    return label is not None and has_unit(text, label.field) and bool(re.search(r"\d", text))


_BULLET = re.compile(r"^\s*[-•▪■◆●*·]\s+[^\W\d_]")


def _is_value_line(line: Line) -> bool:
    text = fold(line.text)
    if _BULLET.match(line.text):
        return False
    starts_like_value = bool(text) and (text[0].isdigit() or text[0] in "±+-<>≤≥~(")
    return (
        (starts_like_value or meaning(text).role in ("min", "typ", "max"))
        and not is_label(text)
        and len(text) <= 60
        and not choices_in(text)
        and not _is_numbered_pair(text)
    )


def _is_numbered_pair(text: str) -> bool:
    """Whether a line is a label with its value behind the number of its paragraph ("2.1 Nominal frequency: 26 MHz")."""
    pairs = split_pairs(text)[0]
    return bool(pairs) and is_label(_PARAGRAPH.sub("", pairs[0][0]))


_PARAGRAPH = re.compile(r"^[\d.()]+\s+")


def _key_run(lines: Sequence[Line], index: int, items: list[Item]) -> int:
    """Choices of an ordering key, one or several a line, with the label above them or in front of them."""
    choices = []
    end = index
    label: Piece | None = None
    while end < len(lines):
        segments = list(lines[end].segments)
        if (
            len(segments) > 1
            and end == index
            and is_label(key_label(segments[0].text))
            and all(choices_in(s.text) for s in segments[1:])
        ):
            label = Piece(segments[0].text, segments[0].where)
            segments = segments[1:]
        found = [(code, Piece(text, s.where, s.confidence)) for s in segments for code, text in choices_in(s.text)]
        if not found or not all(choices_in(segment.text) for segment in segments):
            break
        choices += found
        end += 1
        if label is not None:
            break
    if len(choices) < 2:
        return 0
    label = label or _label_above(items)
    items.extend(_text(line) for line in lines[index:end])
    if label is not None:
        items.append(Key(Piece(key_label(label.text), label.where), tuple(choices)))
    return end - index


def _label_above(items: Sequence[Item]) -> Piece | None:
    """The line above the choices, if it is a label or a short heading without a number."""
    for item in reversed(items[-1:]):
        if not isinstance(item, Text):
            return None
        text = key_label(item.piece.text)
        if is_label(text) or (len(text) <= 60 and not any(character.isdigit() for character in text)):
            return Piece(item.piece.text, item.piece.where)
    return None
