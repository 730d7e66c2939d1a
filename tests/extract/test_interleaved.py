from extract.interleaved import interleaved

SHEET = (
    "ABQ series crystal Nominal frequency f_nom 16 MHz to 60 MHz Frequency tolerance Frequency stability f_tol f_tem "
    "±20 ppm max at 25 °C ±3 °C ±30 ppm max Storage temperature Operating temperature T_stg -55 °C to +125 °C "
    "T_use -40 °C to +105 °C Drive level Insulation resistance DL IR 200 µW Max. 500 MΩ Min. "
    "Load capacitance Shunt capacitance CL C0 18 pF standard, others on request 5.0 pF max"
)


def test_of_labels_side_by_side_each_gets_its_own_value():
    held = {label: value.strip() for label, value in interleaved(SHEET)}
    assert held == {
        "Nominal frequency": "16 MHz to 60 MHz",
        "Frequency tolerance": "±20 ppm max at 25 °C ±3 °C",
        "Frequency stability": "±30 ppm max",
        "Storage temperature": "-55 °C to +125 °C",
        "Operating temperature": "-40 °C to +105 °C",
        "Drive level": "200 µW Max.",
        "Insulation resistance": "500 MΩ Min.",
        "Load capacitance": "18 pF standard, others on request",
        "Shunt capacitance": "5.0 pF max",
    }


def test_a_pair_with_a_value_too_many_is_left_out():
    held = dict(interleaved(SHEET.replace("5.0 pF max", "3.0 pF typ 5.0 pF max")))
    assert "Load capacitance" not in held
    assert "Shunt capacitance" not in held


def test_a_text_without_a_label_is_no_such_dump():
    assert interleaved("The parts are delivered on tape. " * 10) is None


def test_a_sentence_with_labels_one_by_one_is_no_such_dump():
    assert (
        interleaved("Frequency 16 MHz, tolerance ±10 ppm, load capacitance 9 pF, ESR 60 Ω, drive level 100 µW") is None
    )
