"""Parts whose numbers are merged over rows of bands."""

from building import table

from extract.lists import listing_drafts
from extract.tables import read_table


def test_merged_rows_are_bands_of_one_part():
    made = table(
        ("Type", "Frequency range (MHz)", "CL (pF)", "Frequency (MHz)", "ESR max. (Ω)"),
        ("AB-32S", "10 to 54", "8", "10 to 16", "100"),
        (None, None, None, "16 to 54", "60"),
        ("AB-25S", "12 to 60", "9", "12 to 60", "80"),
        spans={(1, 0): (2, 1), (1, 1): (2, 1), (1, 2): (2, 1)},
    )
    drafts = listing_drafts(read_table(made)[0])
    found = [
        (
            draft.part_number,
            [(each.max, each.when.frequency_mhz) for each in draft.candidates if each.field == "esr_ohm"],
        )
        for draft in drafts
    ]
    assert found == [("AB-32S", [(100, (10, 16)), (60, (16, 54))]), ("AB-25S", [(80, (12, 60))])]
    assert [each.typ for each in drafts[0].candidates if each.field == "load_capacitance_pf"] == [8]
