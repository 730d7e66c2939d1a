"""Values under the names of several models."""

from extract.subjects import package_beside


def test_each_model_has_the_size_that_stands_behind_its_name():
    lines = ["AB-1 / AB-2  3.2 x 2.5 mm", "The AB-3 (2.0 x 1.6 mm) and AB-30 (1.6 x 1.2 mm) are small."]
    names = ("AB-1", "AB-2", "AB-3", "AB-30")
    assert [package_beside(name, names, lines) for name in names] == [
        "3.2 x 2.5 mm",
        "3.2 x 2.5 mm",
        "2.0 x 1.6 mm",
        "1.6 x 1.2 mm",
    ]


def test_a_size_further_on_in_the_sentence_is_not_the_models():
    assert package_beside("AB-1", ("AB-1",), ["AB-1 is sold on reels of a diameter of 18.0 x 8.0 mm"]) is None
