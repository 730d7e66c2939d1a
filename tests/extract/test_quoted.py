from building import candidate, document, line

from extract.model import Where
from extract.quoted import quoted_lines, without_quoted

OWN, QUOTED = {"where": Where(line=3)}, {"where": Where(line=9)}


def quoted(*texts):
    return quoted_lines(document(*(line(text, number=number) for number, text in enumerate(texts, 1))))


def test_lines_with_the_mark_are_quoted():
    assert quoted("CL: 9 pF", "> CL: 8 pF", ">> please quote") == {2, 3}


def test_all_below_the_heading_of_the_mail_answered_is_quoted():
    assert quoted("CL: 9 pF", "-----Original Message-----", "From: B", "CL: 8 pF") == {2, 3, 4}


def test_all_below_the_line_that_says_who_wrote_is_quoted():
    assert quoted("CL : 9 pF", "Le 13/04/2026 à 16:40, J. Perrot a écrit :", "CL : 8 pF") == {2, 3}


def test_the_quoted_value_gives_way_to_the_mail_s_own():
    own, other = candidate("esr_ohm", high=70.0, **OWN), candidate("esr_ohm", high=50.0, **QUOTED)
    assert without_quoted([own, other], frozenset({9})) == [own]


def test_what_only_the_quotation_states_must_be_looked_at():
    own, other = candidate("esr_ohm", high=70.0, **OWN), candidate("load_capacitance_pf", typ=9.0, **QUOTED)
    kept = without_quoted([own, other], frozenset({9}))
    assert [bool(each.doubts) for each in kept] == [False, True]


def test_a_forwarded_sheet_is_read_as_it_stands():
    forwarded = [candidate("esr_ohm", high=70.0, **QUOTED), candidate("load_capacitance_pf", typ=9.0, **QUOTED)]
    assert without_quoted(forwarded, frozenset({9})) == forwarded
