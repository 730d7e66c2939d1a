"""Part numbers of a list looked at all at once give what a look at each gives."""

from hypothesis import given
from hypothesis import strategies as st

from extract import wording
from extract.identity import speaks_of_a_crystal
from extract.lists import part_name
from extract.rownames import part_names, telling

TEXTS = st.lists(
    st.one_of(
        st.text(alphabet="ABCXTOSMEQ 0123-_./()晶振体", max_size=14),
        st.sampled_from(
            ["TCXO-25", "ABQ32-16M", "XTAL-9", "n/a", "-", "", "see list", "A (oscillator)", "N.A.", "晶振"]
        ),
    ),
    max_size=12,
)


@given(TEXTS)
def test_a_cell_names_a_part_where_it_states_something(texts):
    assert part_names(texts) == [None if wording.not_stated(text) else part_name(text) for text in texts]


@given(TEXTS)
def test_no_telling_word_in_a_part_number_is_overlooked(texts):
    each = {text: (bool(wording.oscillator_words(text)), speaks_of_a_crystal([text])) for text in texts}
    assert telling(texts) == {text: told for text, told in each.items() if any(told)}


def test_a_name_is_the_token_of_a_cell_with_more_words():
    assert part_names(["ABQ32-16M-8", "ABQ32-16M-8 (tape and reel)", "not made"]) == [
        "ABQ32-16M-8",
        "ABQ32-16M-8",
        "not made",
    ]
