"""What a printed label or head means, in any language of `wording/`: its field, bound, unit and conditions."""

from __future__ import annotations

import re
from dataclasses import dataclass, replace
from functools import cache, lru_cache

from extract.fields import field_of
from extract.fold import fold, key
from extract.labels import EDGE, Parts, is_nominal, one_year_words, take_apart, without_unit
from extract.model import When
from extract.runs import IDEOGRAPHS, Run, words_of
from extract.units import factor
from extract.vocabulary import vocabulary

LONGEST_LABEL = 160
LONGEST_HEAD = 60
# In words; a longer one makes a sentence of a label.
LONGEST_CONDITION = 6


@dataclass(frozen=True, slots=True)
class Label:
    """A label read.

    `bound` is "min", "typ", "max", or several in the order of the numbers below ("typ/max"), which `read_values` takes
    as it is. `unit` is as printed; `plus_minus`: the label prints ±; `exact` is False for a partial or misspelt match;
    `rest` is what was left over; `symbol` says that only a symbol (CL, R1) stood there, no wording.
    """

    field: str
    bound: str | None = None
    unit: str | None = None
    plus_minus: bool = False
    when: When = When()
    exact: bool = True
    rest: str = ""
    symbol: bool = False


@dataclass(frozen=True, slots=True)
class FoundLabel:
    """A label inside a longer text: `text[start:end]` of the folded text."""

    start: int
    end: int
    label: Label


@lru_cache(maxsize=32768)
def read_label(text: str) -> Label | None:
    """What field the label `text` names, with the bound, unit, ± and conditions in it; None for none, or for several.

    An exact wording decides first, then a wording with a symbol, unit, bound or condition beside it, then the longest
    known wording inside (`exact` False when more than filling words is left over), at last one slip of the pen.
    """
    folded = fold(text)
    if not folded or len(folded) > LONGEST_LABEL or key(folded).isdigit():
        return None
    parts = take_apart(folded)
    if any(_trap_in(inside) == _TOTAL for inside in parts.brackets):
        return None
    if shared := _shared_by_condition(parts, folded):
        return _label(parts, shared)
    if key(parts.core) in vocabulary().shared and not parts.brackets:
        return None
    found = _exact(parts) or _beside_symbol(parts) or _inside(parts) or _run_together(parts) or _misspelt(parts)
    found = found or _one_of_two_languages(folded)
    if found and found.bound is None and field_of(found.field).limit == "max" and _recommends(folded):
        return replace(found, bound="typ")
    return found


# "Tolerance (total over temperature)" is neither tolerance nor stability.
_TOTAL = "a total of all causes"
_LANGUAGES = re.compile(r"(?<=[^\W\d_])\s*(?:\s/\s|\n)\s*(?=[^\W\d_])")


def _one_of_two_languages(folded: str) -> Label | None:
    """The field of "Charge / Load" where one of the two is a wording and the other is in a language not known."""
    pieces = _LANGUAGES.split(folded)
    if len(pieces) != 2 or any(re.search(r"\d", piece) or len(piece.split()) > 4 for piece in pieces):
        return None
    known = [label for piece in pieces if (label := read_label(piece)) is not None and label.exact]
    if len(known) != 1 or known[0].symbol or any(_trap_in(piece) for piece in pieces):
        return None
    return replace(known[0], exact=False)


_ROOM = re.compile(r"(?<![\d.,±-])\+?2[0-9]\s?(?:±\s?\d\s?)?(?:°|C\b)")


def _shared_by_condition(parts: Parts, folded: str) -> str | None:
    """The field of a symbol that several share, by what stands behind it: "df/f @ 25 °C", "df/f over T"."""
    known = vocabulary()
    words = parts.core.split()
    at = next((index for index, word in enumerate(words) if word.casefold() in known.at_words), len(words))
    fields, behind = known.shared.get(key(" ".join(words[:at])), ()), " ".join(words[at + 1 :])
    if _TOLERANCE not in fields or _STABILITY not in fields:
        return None
    if parts.when.years is not None:
        return _AGEING if _AGEING in fields else None
    if behind:
        named = known.symbols.get(key(behind)) or _named(behind)
        return _STABILITY if named == "operating_temperature_c" else None
    return _TOLERANCE if _ROOM.search(folded) and not parts.brackets else None


def _recommends(folded: str) -> bool:
    """Whether the label names what is recommended: the usual value, no limit ("Recommended drive level")."""
    words = set(re.findall(r"\w+", folded.casefold()))
    phrases = vocabulary().phrases.get("recommended", ())
    return any(each in words or (IDEOGRAPHS.match(each) and each in folded) for each in phrases)


def ambiguous_label(text: str) -> tuple[str, ...]:
    """The fields a label may mean where it means several ("Frequency tolerance / stability", "Δf/f"); else ()."""
    if read_label(text) is not None:
        return ()
    parts = take_apart(fold(text)[:LONGEST_LABEL])
    shared = vocabulary().shared
    for name in (" ".join([parts.core, *parts.brackets]), parts.core, *parts.brackets):
        if fields := shared.get(key(name)):
            return fields
    named = _fields_inside(parts.core).strong
    return tuple(named) if len(named) > 1 else ()


def symbol_of(text: str) -> str | None:
    """The field of a symbol standing alone in a symbol column ("C0", "R 1", "C_L", "B"); None where it has several."""
    return vocabulary().symbols.get(key(text))


def _label(parts: Parts, field: str, *, exact: bool = True, rest: str = "", symbol: bool = False) -> Label:
    when = parts.when
    if when.years is None and key(parts.core) in vocabulary().yearly:
        when = when.model_copy(update={"years": 1.0})
    # A letter or two in brackets may be a symbol as well as a unit ("Parabolic coefficient (K)").
    symbol_like = parts.unit is not None and len(parts.unit) <= 2 and factor(parts.unit, field) is None
    unit = None if symbol_like else parts.unit
    return Label(field, parts.bound, unit, parts.plus_minus, when, exact, rest, symbol)


def _named(core: str) -> str | None:
    wanted, labels = key(core), vocabulary().labels
    return labels.get(wanted) or labels.get(wanted.replace("/", ""))


def _exact(parts: Parts) -> Label | None:
    head, comma, tail = parts.core.partition(",")
    words = parts.core.split()
    turned = [f"{tail} {head}"] if comma else [" ".join(reversed(words))] if len(words) == 2 else []
    for name in (parts.core, " ".join([parts.core, *parts.brackets]), *turned):
        if field := _named(name):
            return _label(parts, field)
    if _symbol(parts.core, parts) is None and without_unit(parts) and (field := _named(parts.core)):
        return _label(parts, field)
    tokens = parts.core.split()
    for at in range(1, len(tokens) - 1):
        # "Temperatura min. di esercizio"
        bound = vocabulary().bounds.get(key(tokens[at]))
        if bound in ("min", "max") and (field := _named(" ".join(tokens[:at] + tokens[at + 1 :]))):
            parts.bound = parts.bound or bound
            return _label(parts, field)
    for at, rest in ((-1, tokens[:-1]), (0, tokens[1:])):
        name = " ".join(rest)
        if (
            rest
            and vocabulary().bounds.get(key(tokens[at])) == "typ"
            and (field := _named(name) or _symbol(name, parts))
        ):
            parts.bound = parts.bound or (None if is_nominal(tokens[at]) else "typ")
            return _label(parts, field, symbol=not _named(name))
    return None


# "f_tol" and its like, the underscore lost, are no words of any language.
_SAFE_LOWER = re.compile(r"esr|cl|[crlf]\d|f(?:nom|tol|tem|age|aging|stab)")


def _symbol(text: str, parts: Parts) -> str | None:
    """As `symbol_of`, for cells that may hold anything: no single letter but Q, no lower-case word, no weak one."""
    wanted, printed = key(text), text.strip(EDGE)
    if not wanted or len(wanted) > 12 or (len(wanted) == 1 and printed != "Q"):
        return None
    if wanted in vocabulary().weak_symbols and not parts.snake:
        return None
    if printed.isascii() and printed == printed.lower() and not parts.snake and not _SAFE_LOWER.fullmatch(wanted):
        return None
    return vocabulary().symbols.get(wanted)


def _beside_symbol(parts: Parts) -> Label | None:
    """A wording with its symbol or another name beside it, or a symbol alone."""
    tokens = parts.core.split()
    for at in range(1, len(tokens)):
        head, tail = " ".join(tokens[:at]), " ".join(tokens[at:])
        for wording, symbol in ((head, tail), (tail, head)):
            field = _named(wording.strip(EDGE))
            if field and _may_be(symbol, field):
                return _label(parts, field)
    for name in parts.brackets:
        if (field := _named(name)) and not _fields_inside(parts.core).strong:
            return _label(parts, field)
    for field in vocabulary().shared.get(key(parts.core), ()):
        if any(vocabulary().symbols.get(key(name)) == field for name in parts.brackets):
            return _label(parts, field)
    if field := _symbol(parts.core, parts) or _letter_with_unit(parts) or _bounded_symbol(parts):
        return _label(parts, field, symbol=True)
    if not parts.core:
        for name in parts.brackets:
            if field := _symbol(name, parts):
                return _label(parts, field, symbol=True)
    return None


_BOUNDED = re.compile(r"(?P<symbol>[A-Za-z]{1,3}\d?)[ ._]?(?P<bound>min|typ|max)", re.IGNORECASE)


def _bounded_symbol(parts: Parts) -> str | None:
    """The field of a symbol and a bound in one word: "Tmax", "C0max"."""
    found = _BOUNDED.fullmatch(parts.core)
    field = vocabulary().symbols.get(key(found["symbol"])) if found else None
    if found is None or field is None:
        return None
    parts.bound = found["bound"].lower()
    return field


def _letter_with_unit(parts: Parts) -> str | None:
    """The field of a single letter whose unit stands beside it: "f (MHz)"; of temperatures also "T min"."""
    wanted = key(parts.core)
    if parts.core == "T" and parts.bound in ("min", "max") and not parts.unit and not parts.brackets:
        return vocabulary().symbols.get(wanted)
    if len(wanted) != 1 or not parts.unit:
        return None
    fields = vocabulary().shared.get(wanted) or (vocabulary().symbols.get(wanted, ""),)
    fitting = [field for field in fields if field and factor(parts.unit, field) is not None]
    return fitting[0] if len(fitting) == 1 else None


def _may_be(symbol: str, field: str) -> bool:
    wanted = key(symbol)
    return len(wanted) <= 12 and (
        vocabulary().symbols.get(wanted) == field or field in vocabulary().shared.get(wanted, ())
    )


@dataclass(slots=True)
class _Inside:
    """Fields named by wordings inside a text, with the length of the wording, and what was left over.

    `condition` is what was left over behind "at", "over", "in" and their like; `names` counts the weak wordings.
    """

    strong: dict[str, int]
    weak: dict[str, int]
    rest: list[str]
    condition: list[str]
    names: int = 0


@lru_cache(maxsize=8192)
def _fields_inside(text: str) -> _Inside:
    """What follows "at", "over", "in" is a condition and names nothing, but for a tolerance over temperature."""
    known, words = vocabulary(), words_of(text)
    inside = _Inside({}, {}, [], [])
    first, condition = 0, False
    while first < len(words):
        run = known.labels.run_at(words, first)
        if run is None:
            printed = text[words[first].start : words[first].end]
            condition = condition or printed.casefold() in known.at_words
            symbol = known.symbols.run_at(words, first)
            first = symbol.last + 1 if symbol else first + 1
            if not symbol and words[first - 1].key not in known.filling | known.at_words and printed != "/":
                (inside.condition if condition and (inside.strong or inside.weak) else inside.rest).append(printed)
            continue
        first = run.last + 1
        if condition and inside.strong:
            _add_condition(inside, run.meaning, text[run.start : run.end])
            continue
        target = inside.weak if run.key in known.weak else inside.strong
        inside.names += run.key in known.weak
        target[run.meaning] = max(target.get(run.meaning, 0), len(run.key))
    return inside


def _add_condition(inside: _Inside, field: str, printed: str) -> None:
    if field == "operating_temperature_c" and _TOLERANCE in inside.strong:
        inside.strong[_STABILITY] = inside.strong.pop(_TOLERANCE) + len(printed)
    elif field not in inside.strong and not (field == "operating_temperature_c" and _STABILITY in inside.strong):
        inside.condition.append(printed)


_TOLERANCE, _STABILITY, _AGEING = "frequency_tolerance_ppm", "frequency_stability_ppm", "ageing_ppm"


def _inside(parts: Parts) -> Label | None:
    text = " ".join([parts.core, *parts.brackets])
    inside = _fields_inside(text)
    named = inside.strong or inside.weak
    if len(named) != 1 or _trap_in(text) is not None:
        return None
    field, length = next(iter(named.items()))
    rest, left = " ".join([*inside.rest, *inside.condition]), len(key("".join(inside.rest)))
    if left > (1.5 * length if inside.strong else 0.5 * length) or len(inside.condition) > LONGEST_CONDITION:
        return None
    # Two weak wordings of one field ("Frequenzbereich / frequency range") say it in two languages.
    return _label(parts, field, exact=(bool(inside.strong) or inside.names > 1) and not rest, rest=rest)


def _run_together(parts: Parts) -> Label | None:
    """Words without spaces ("Agingperyear", "LoadCapacitanceCL"): a wording first, then what may stand beside it."""
    wanted, words = key(parts.core), vocabulary()
    if len(wanted) < 9 or max(map(len, parts.core.split()), default=0) < 9:
        return None
    for length in range(len(wanted) - 1, 4, -1):
        field, rest = words.labels.get(wanted[:length]), wanted[length:]
        if field is None:
            continue
        if rest in words.bounds:
            parts.bound = parts.bound or words.bounds[rest]
        elif rest in one_year_words():
            parts.when = parts.when.model_copy(update={"years": 1.0})
        elif words.symbols.get(rest) != field and rest not in words.filling:
            return None
        return _label(parts, field)
    return None


@cache
def _by_either_end() -> dict[str, list[str]]:
    """Every long wording under its first and last letters: one slip spoils one end, never both."""
    index: dict[str, list[str]] = {}
    for wording in vocabulary().labels:
        if len(wording) >= _LONG and wording.isalpha():
            for end in _ends(wording):
                index.setdefault(end, []).append(wording)
    return index


_LONG = 9


def _ends(word: str) -> tuple[str, str]:
    return word[:4] + "-", "-" + word[-4:]


def _with_one_out(word: str) -> set[str]:
    return {word} | {word[:at] + word[at + 1 :] for at in range(len(word))}


def _misspelt(parts: Parts) -> Label | None:
    """One letter wrong, missing, too many or two of them swapped, in a wording of nine letters or more."""
    wanted = key(parts.core)
    if not _LONG <= len(wanted) <= 60 or not wanted.isalpha():
        return None
    alike = {wording for end in _ends(wanted) for wording in _by_either_end().get(end, ())}
    close = [wording for wording in alike if abs(len(wording) - len(wanted)) < 2]
    near = {wording for wording in close if not _with_one_out(wanted).isdisjoint(_with_one_out(wording))}
    if not near or _trap_in(parts.core) is not None:
        return None
    fields = {vocabulary().labels[wording] for wording in near}
    return _label(parts, fields.pop(), exact=False) if len(fields) == 1 else None


def find_labels(text: str) -> tuple[FoundLabel, ...]:
    """Every label inside a longer text, from left to right, not overlapping; positions are those of `fold(text)`.

    For prose and one-line dumps. A wording that is part of many others ("frequency", "tolerance" alone) is not `exact`.
    """
    return _find_labels(fold(text))


@lru_cache(maxsize=2048)
def _find_labels(folded: str) -> tuple[FoundLabel, ...]:
    known, words, nothing = vocabulary(), words_of(folded), Parts(core="")
    found: list[FoundLabel] = []
    first = 0
    while first < len(words):
        run = known.labels.run_at(words, first)
        symbol = None if run else known.symbols.run_at(words, first)
        if run is not None and not _BREAK.search(folded, run.start, run.end):
            found.append(FoundLabel(run.start, run.end, Label(run.meaning, exact=run.key not in known.weak)))
            first = run.last
        elif (
            symbol is not None
            and _stands_for_itself(folded, symbol)
            and _symbol(folded[symbol.start : symbol.end], nothing)
        ):
            found.append(FoundLabel(symbol.start, symbol.end, Label(symbol.meaning, symbol=True)))
            first = symbol.last
        first += 1
    return tuple(found)


_NAMES_VALUE = re.compile(r"\s?[:=≥>]")


def _stands_for_itself(folded: str, symbol: Run[str]) -> bool:
    """A single letter in running text is a code as often as a symbol; it is one where its value is set equal to it."""
    return symbol.end - symbol.start > 1 or _NAMES_VALUE.match(folded, symbol.end) is not None


# A wording does not go on over these.
_BREAK = re.compile(r"[,;()]|\n\n")


# --- heads, names and words that are no field


# What stands behind a colon is a head's value, not another name of it ("Resonance: series").
_AFTER_COLON = re.compile(r"(?<=\w)\s?:\s?\w[^()]*$")


def _names(text: str) -> tuple[list[str], list[str]]:
    """A head as printed and without brackets or number; then each of its languages and alternatives alone."""
    folded = fold(text)
    if len(folded) > LONGEST_HEAD:
        return [], []
    plain = re.sub(r"[(\[][^()\[\]]*[)\]]", " ", folded).strip(EDGE)
    numbered = re.sub(r"^\s*\d{1,2}\s*[.)、]\s*", "", plain)
    head = _AFTER_COLON.sub("", folded)
    pieces = [piece for piece in re.split(r"[/|\n()\[\]:,]", head) if piece.strip()]
    latin = IDEOGRAPHS.sub(" ", folded).strip(EDGE)
    return [folded, plain, numbered], [*pieces, *IDEOGRAPHS.findall(folded), latin]


def _meaning(text: str, table: dict[str, str]) -> str | None:
    """What the head means; of several languages or alternatives the first that is known, unless a field is named."""
    whole, pieces = _names(text)
    for name in whole:
        if (wanted := key(name)) in table:
            return table[wanted]
    if not pieces or read_label(text) is not None:
        return None
    return next((table[wanted] for name in pieces if (wanted := key(name)) in table), None)


@lru_cache(maxsize=8192)
def role_of(text: str) -> str | None:
    """What a table's head cell says of its column: min, typ, max, unit, parameter, symbol, condition, value, remarks.

    Also "mode", "cut", "band", "model", "code". A head that names a field ("ESR max") is asked of `read_label`.
    """
    return _meaning(text, vocabulary().roles)


@lru_cache(maxsize=8192)
def mode_of(text: str) -> str | None:
    """The mode of vibration, "fundamental", "third overtone" ..., where `text` states one, else None.

    "F", "T", "1", "3" count only as the whole of a cell; ask only where a mode is expected.
    """
    if code := vocabulary().mode_codes.get(key(text)):
        return code
    found = {run.meaning for run in vocabulary().modes.runs(fold(text)[:400])}
    return found.pop() if len(found) == 1 else None


_CUT_LETTERS = re.compile(r"[A-Z]{2}")


@lru_cache(maxsize=8192)
def cut_of(text: str) -> str | None:
    """The cut, "AT", "BT", "SC", "tuning fork" ..., where `text` states one; "at" in small letters is none."""
    folded = fold(text)
    found = set()
    for run in vocabulary().cuts.runs(folded[:400]):
        printed = folded[run.start : run.end]
        if len(run.key) > 2 or _CUT_LETTERS.fullmatch(printed):
            found.add(run.meaning)
    return found.pop() if len(found) == 1 else None


@lru_cache(maxsize=8192)
def identity_label(text: str) -> str | None:
    """What a label asks for: part_number, maker, package, stock_number, customer, date, description; else None."""
    return _meaning(text, vocabulary().identity)


@lru_cache(maxsize=8192)
def attribute_label(text: str) -> str | None:
    """The contract's attribute ("pads", "aec_q200", "moisture_level" ...) that the label names."""
    return _meaning(text, vocabulary().attributes)


@lru_cache(maxsize=8192)
def trap_of(text: str) -> str | None:
    """Why a row that looks like a field's is none ("drive level dependency", "a reliability test"), else None.

    A label that is a field's exact wording is no trap, nor is a long text.
    """
    folded = fold(text)
    if len(folded) > LONGEST_LABEL or role_of(text) is not None:
        return None
    trap = _trap_in(folded)
    return None if trap is None or _exact(take_apart(folded)) is not None else trap


def _trap_in(text: str) -> str | None:
    known = vocabulary().traps.runs(text)
    return known[0].meaning if known else None


@lru_cache(maxsize=8192)
def oscillator_words(text: str) -> tuple[str, ...]:
    """The words in `text` that only an oscillator's, resonator's or filter's sheet prints, each once, as printed."""
    folded = fold(text)
    found: dict[str, str] = {}
    for run in vocabulary().oscillator.runs(folded):
        found.setdefault(run.key, folded[run.start : run.end])
    return tuple(found.values())


@lru_cache(maxsize=8192)
def not_stated(text: str) -> bool:
    """Whether the cell says nothing: empty, "-", "—", "n/a". A lone "0" is for `read_values` to judge by the field."""
    folded = fold(text).casefold()
    return not key(folded) or folded in vocabulary().phrases.get("not_stated", ())
