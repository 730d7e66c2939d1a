"""Tables of pads -> lines that name the pads of each use."""

from building import table

from extract.attributes import attributes_of
from extract.padtables import read_pad_table
from extract.tables import read_table


def pads_of(*rows):
    return attributes_of({}, [text.piece.text for text in read_pad_table(table(*rows).grid())]).pads


def test_a_table_of_pads_names_those_of_crystal_and_ground():
    pads = pads_of(("Pin", "Function"), ("1", "Crystal"), ("2", "GND"), ("3", "Crystal"), ("4", "GND"))
    assert (pads.count, pads.crystal, pads.ground) == (4, (1, 3), (2, 4))


def test_a_lying_table_of_pads_is_read_like_an_upright_one():
    pads = pads_of(("脚位", "#1", "#2", "#3", "#4"), ("连接", "晶体", "接地", "晶体", "接地"))
    assert (pads.crystal, pads.ground) == ((1, 3), (2, 4))


def test_a_numbered_specification_is_no_table_of_pads():
    rows = (("No.", "Item", "Value"), ("1", "Crystal mode", "Fundamental"), ("2", "Case material", "ceramic"))
    assert read_pad_table(table(*rows).grid()) == []


def test_a_table_of_pads_states_no_value():
    found = read_table(table(("Pin", "Function"), ("1", "Crystal"), ("2", "GND"), ("3", "Crystal"), ("4", "GND")))
    assert all("pad" in item.piece.text for item in found)
