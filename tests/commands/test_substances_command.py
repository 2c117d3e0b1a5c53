"""``soplint substances``: molar mass with working, forms, strength, pKa; what is not known."""


def test_molar_mass_with_its_working(run):
    done = run("substances", "Na2HPO4·7H2O")
    assert (done.returncode, done.stderr) == (0, "")
    lines = done.stdout.splitlines()
    assert lines[0] == "disodium hydrogen phosphate heptahydrate"
    # Atomic weights of 2021 added by hand: 2 × 22.98976928 + 15 × 1.008 + 30.973762 + 11 × 15.999
    assert any(line.endswith("= 268.062 g/mol") and "2 Na × 22.98976928" in line for line in lines)
    assert "disodium hydrogen phosphate dodecahydrate Na2HPO4·12H2O, 358.14 g/mol" in done.stdout


def test_words_of_a_name_need_no_quotes(run):
    assert run("substances", "boric", "acid").stdout == run("substances", "boric acid").stdout


def test_commercial_solution_has_strength_and_molar_strength(run):
    text = run("substances", "hydrochloric acid 37 %").stdout
    assert "37 % w/w (as sold " in text
    # 10 × 1.18 × 37 / 36.458 by hand
    assert text.count("= 12.0 mol/L") == 1
    assert "H314" in text


def test_constants_carry_status_and_source(run):
    # pKa 4.756 at 25 °C: Goldberg, Kishore & Lennen 2002
    (line,) = [li for li in run("substances", "acetic acid").stdout.splitlines() if "  pKa" in li]
    assert "4.76 ± 0.01 (acetate, charge 0 to -1; 25 °C, zero ionic strength; confirmed" in line
    assert "Goldberg" in line


def test_a_name_without_form_lists_the_forms(run):
    text = run("substances", "disodium hydrogen phosphate").stdout
    assert text.count("can also mean") == 1
    assert text.count("heptahydrate") == 1


def test_a_substance_without_formula_says_so(run):
    assert "none: a mixture, polymer or natural product" in run("substances", "agarose").stdout


def test_a_formula_outside_the_catalogue_still_has_a_molar_mass(run):
    text = run("substances", "XeF4").stdout
    assert "(not in the catalogue)" in text
    assert "= 207.287 g/mol" in text  # 131.293 + 4 × 18.998403 by hand


def test_what_is_not_known(run):
    for name, words in {
        "sodum chloride": "near: sodium chloride",
        "no such thing": "no substance has the name or formula 'no such thing'",
        "\x1b[31m": "\\x1b[31m",
        "H" * 5000: "no substance",
        "(" * 5000: "no substance",
        "": "which substance?",
    }.items():
        done = run("substances", name)
        assert done.returncode == 2
        assert done.stdout == ""
        assert words in done.stderr and done.stderr.count("\n") == 1
