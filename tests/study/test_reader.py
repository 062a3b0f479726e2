"""What a spec is refused with: place, field, sentence, remedy and number, all faults at once."""

import pytest

from rankdocket.errors import InputError, Place
from rankdocket.study.reader import read_spec
from study.faults import changed, messages, spec_messages
from study.specs import PANEL, PLANKTON

TAKEN_AWAY = (
    (
        "alpha: 0.05",
        "aplha: 0.05",
        's.yaml:32:3: inference.aplha: "aplha" is not a key of inference. nearest: alpha. (message 15)',
    ),
    ("alpha: 0.05", "alpha: 0,05", 's.yaml:32:10: inference.alpha: "0,05" is not a number. Write 0.05. (message 30)'),
    ("alpha: 0.05", "alpha: 5%", 's.yaml:32:10: inference.alpha: "5%" is not a number. Write 0.05. (message 30)'),
    (
        "alpha: 0.05",
        "alpha: 0.7",
        (
            "s.yaml:32:10: inference.alpha: 0.7 is not possible here. Write a number more than 0 and at most 0.5. "
            "(message 31)"
        ),
    ),
    (
        "alpha: 0.05",
        "alpha: [0.05]",
        (
            "s.yaml:32:3: inference.alpha: a list stands here; one value is expected. Write one value after the colon. "
            "(message 28)"
        ),
    ),
    (
        "alpha: 0.05",
        "alpha:",
        (
            "s.yaml:32:3: inference.alpha: nothing is written after alpha. Write a value, or leave the key out. "
            "(message 26)"
        ),
    ),
    (
        "inference:\n  alpha: 0.05",
        "",
        "s.yaml: inference: inference is missing. Write inference: and its keys. (message 27)",
    ),
    (
        "    role: primary\n",
        "",
        "s.yaml:26:3: associations.A1: role is missing. Write role: and one of: primary, secondary, exploratory. (message 27)",
    ),
    (
        "expected_sign: negative",
        "expected_sign: upwards",
        (
            's.yaml:30:33: associations.A1.hypothesis.expected_sign: "upwards" is not in the list. Write one of: '
            "positive, negative, either. (message 29)"
        ),
    ),
    (
        "{expected_sign: negative}",
        "upwards",
        (
            "s.yaml:30:17: associations.A1.hypothesis: keys are expected here. Write the keys below this line, indented. "
            "(message 28)"
        ),
    ),
    (
        "[chlorophyll, clarity]",
        "[chlorophyl, clarity]",
        (
            's.yaml:27:15: associations.A1.between: "chlorophyl" is not an entry of variables. nearest: chlorophyll. '
            "(message 36)"
        ),
    ),
    (
        "[chlorophyll, clarity]",
        "[clarity, clarity]",
        's.yaml:27:24: associations.A1.between: "clarity" stands twice. Write two variables. (message 37)',
    ),
    (
        "[chlorophyll, clarity]",
        "[clarity]",
        "s.yaml:27:5: associations.A1.between: the list is too short: 1 of 2. Write the missing entries. (message 28)",
    ),
    (
        "[chlorophyll, clarity]",
        "clarity",
        (
            "s.yaml:27:14: associations.A1.between: a list is expected here. Write it in square brackets: "
            "[first, second]. (message 28)"
        ),
    ),
    (
        "  A1:",
        "  1A:",
        (
            's.yaml:26:3: associations: "1A" cannot be a name. Write letters a to z, digits, _ and -, and begin with a '
            "letter. (message 32)"
        ),
    ),
    (
        "received/survey.csv",
        "../survey.csv",
        (
            's.yaml:8:11: data.survey.file: "../survey.csv" is not a plain path inside the study folder. Write the path '
            "from the folder of the spec, such as received/zinc.csv. (message 33)"
        ),
    ),
    (
        "received/survey.csv",
        "/data/survey.csv",
        (
            's.yaml:8:11: data.survey.file: "/data/survey.csv" does not begin at the folder of the spec. Write the path '
            "from the folder of the spec, such as received/zinc.csv. (message 33)"
        ),
    ),
    (
        "received/survey.csv",
        "C:\\survey.csv",
        (
            's.yaml:8:11: data.survey.file: "C:\\survey.csv" does not begin at the folder of the spec. Write the path '
            "from the folder of the spec, such as received/zinc.csv. (message 33)"
        ),
    ),
    (
        "received/survey.csv",
        "received\\survey.csv",
        (
            's.yaml:8:11: data.survey.file: "received\\survey.csv" holds a backslash. Write received/survey.csv. '
            "(message 33)"
        ),
    ),
    (
        '["", "n/a"]',
        "n/a",
        (
            's.yaml:9:20: data.survey.missing_codes: one value stands here; a list of codes is expected. Write ["n/a"], '
            "or [] when no code is used. (message 28)"
        ),
    ),
    (
        '["", "n/a"]',
        '["n/a", " n/a"]',
        's.yaml:9:5: data.survey.missing_codes: the code "n/a" stands twice. Keep one of them. (message 35)',
    ),
    (
        "    file:",
        "    received_on: 9.4.2026\n    file:",
        (
            's.yaml:8:18: data.survey.received_on: "9.4.2026" is not a date. Write year-month-day, such as 2026-04-09. '
            "(message 34)"
        ),
    ),
    (
        "    file:",
        "    received_on: 2026-02-30\n    file:",
        (
            's.yaml:8:18: data.survey.received_on: "2026-02-30" is not in the calendar. Write year-month-day, such as '
            "2026-04-09. (message 34)"
        ),
    ),
    (
        "    file:",
        "    units_in_row: 1\n    file:",
        (
            "s.yaml:8:19: data.survey.units_in_row: names and units cannot both stand in row 1. Write the row of the "
            "units, or leave the key out. (message 43)"
        ),
    ),
    (
        "    file:",
        "    first_data_row: 1\n    file:",
        (
            "s.yaml:8:21: data.survey.first_data_row: data cannot begin in row 1 when names or units stand in row 1. "
            "Write 2 or a later row. (message 43)"
        ),
    ),
    (
        "    file:",
        "    last_data_row: 1\n    file:",
        (
            "s.yaml:8:20: data.survey.last_data_row: data cannot end in row 1 when they begin in row 2. Write 2 or a "
            "later row. (message 43)"
        ),
    ),
    (
        "    file:",
        "    thousands_mark: .\n    file:",
        (
            's.yaml:8:21: data.survey.thousands_mark: thousands_mark and decimal_mark are both ".". Write two different '
            "marks, or leave thousands_mark out. (message 40)"
        ),
    ),
    (
        "    file:",
        '    comment_mark: ","\n    file:',
        (
            's.yaml:8:19: data.survey.comment_mark: a comment would begin with the separator ",". Write another mark. '
            "(message 40)"
        ),
    ),
    (
        "    file:",
        '    comment_mark: "a b"\n    file:',
        (
            's.yaml:8:19: data.survey.comment_mark: "a b" cannot mark a comment. Write one to three characters, such as '
            '"#". (message 29)'
        ),
    ),
    (
        "    file:",
        '    thousands_mark: "_"\n    file:',
        (
            's.yaml:8:21: data.survey.thousands_mark: "_" is not such a mark. Write one of: "," "." " " "\'" "’" '
            '"\\u00A0" "\\u202F" (message 29)'
        ),
    ),
    (
        "    unit: m\n",
        "",
        (
            's.yaml:20:3: variables.clarity: unit is missing; a measured variable has one. Write unit: mg/L, or unit: "1" '
            "for a pure number. (message 41)"
        ),
    ),
    (
        "column: secchi",
        "column: surveys / secchi",
        (
            's.yaml:21:13: variables.clarity.column: "surveys" is not a table of data. nearest: survey. For a column of '
            'that whole name write {name: "surveys / secchi"}. (message 36)'
        ),
    ),
    (
        "scale: measured",
        "scale: measured\n    lowest_to_highest: [a, b]",
        (
            "s.yaml:20:5: variables.chlorophyll.lowest_to_highest: the scale measured has numbers, not labels. Leave "
            "lowest_to_highest out, or write scale: ordered. (message 42)"
        ),
    ),
    (
        "scale: measured",
        "scale: ordered\n    other_spellings: {a: b}",
        (
            "s.yaml:20:5: variables.chlorophyll.other_spellings: other spellings belong to labels, and lowest_to_highest "
            "is not written. Write lowest_to_highest, or leave other_spellings out. (message 42)"
        ),
    ),
    (
        "scale: measured",
        "scale: two-valued\n    lowest_to_highest: [a, b, c]",
        (
            "s.yaml:20:5: variables.chlorophyll.lowest_to_highest: 3 labels stand here; the scale two-valued has two "
            "labels. Write [lowest, highest]. (message 28)"
        ),
    ),
    (
        "scale: measured",
        "scale: ordered\n    lowest_to_highest: [a, b, a]",
        's.yaml:20:31: variables.chlorophyll.lowest_to_highest: "a" stands twice. Keep one of them. (message 35)',
    ),
    (
        "scale: measured",
        "scale: ordered\n    lowest_to_highest: [Low, High]\n    other_spellings: {Hi: Higg}",
        (
            's.yaml:21:27: variables.chlorophyll.other_spellings: "Higg" is not in lowest_to_highest. nearest: High. '
            "(message 4)"
        ),
    ),
    (
        "scale: measured",
        "scale: ordered\n    lowest_to_highest: [Low, n/a]",
        (
            's.yaml:9:5: data.survey.missing_codes: "n/a" is a code for missing here and a label of '
            "variables.chlorophyll. Strike it here or there. (message 40)"
        ),
    ),
)


@pytest.mark.parametrize(("old", "new", "expected"), TAKEN_AWAY)
def test_one_mistake_gives_its_own_message(old: str, new: str, expected: str) -> None:
    """A spec with one mistake is refused with the sentence, the place and the number of that mistake."""
    assert expected in spec_messages(changed(PLANKTON, (old, new)))


FOUND_IN_PANEL = (
    (
        "column: tasting / visits",
        "column: loaves / visits",
        (
            "s.yaml:69:23: associations.A2.between: visits stands in table loaves, liking in table tasting. Write two "
            "variables of one table; join the files before the study. (message 38)"
        ),
    ),
    (
        "column: tasting / visits",
        "column: visits",
        (
            "s.yaml:53:13: variables.visits.column: the table is not named and data has several. Write tasting / visits, "
            "or another table before the slash. (message 41)"
        ),
    ),
    (
        "sidedness: two-sided",
        "sidedness: one-sided",
        (
            "s.yaml:72:33: associations.A2.hypothesis.expected_sign: either gives no side, and inference.sidedness is "
            "one-sided. Write positive or negative, or sidedness: two-sided. (message 39)"
        ),
    ),
    (
        ", reason: One primary question",
        "",
        "s.yaml:77:3: inference.several_tests: reason is missing; adjust: none needs one. Write reason: … (message 41)",
    ),
    (
        ", seed: 9223372036854775807",
        "",
        (
            "s.yaml:78:3: inference.p_value: seed is missing; by: permutation draws at random. Write seed: and a whole "
            "number chosen before the data are seen. (message 41)"
        ),
    ),
    (
        "9223372036854775807",
        "9223372036854775808",
        (
            "s.yaml:78:57: inference.p_value.seed: 9223372036854775808 is not possible here. Write 0 to "
            "9223372036854775807. (message 31)"
        ),
    ),
    (
        "[client, court]",
        "[client, client]",
        's.yaml:85:21: report.readers: "client" stands twice. Keep one of them. (message 35)',
    ),
    (
        '{taster: "012"}',
        "{}",
        's.yaml:37:7: rows.leave_out.2.where: no column stands here. Write where: {station: "E07"}. (message 27)',
    ),
    (
        "      reason: Tasted twice\n",
        "",
        "s.yaml:37:7: rows.leave_out.2: reason is missing. Write reason: … (message 27)",
    ),
    (
        "  time_order: hour",
        "  time_order: not applicable\n  independent_because: drawn by lot",
        (
            "s.yaml:34:3: rows.independent_because: rows are said to be independent, but repeated_within names the "
            'column "booth". Write repeated_within: not applicable, or leave independent_because out. (message 40)'
        ),
    ),
    (
        "  A2:",
        "  a1:",
        "s.yaml:68:3: associations.a1: a1 differs from A1 by capital letters alone. Use another name. (message 35)",
    ),
    (
        "most_missing: 0.1",
        "most_missing: 20",
        (
            "s.yaml:81:17: requirements.most_missing: 20 is not possible here. Write a number at least 0 and at most 1. "
            "20 percent is 0.20. (message 31)"
        ),
    ),
    (
        "permutations: 20000",
        "permutations: 2e4",
        (
            's.yaml:78:44: inference.p_value.permutations: "2e4" is not a whole number. Write digits only, 999 to '
            "10000000. (message 30)"
        ),
    ),
    (
        "permutations: 20000",
        "permutations: 20000, most_draws: 19999",
        (
            "s.yaml:78:63: inference.p_value.most_draws: most_draws is 19999, and 20000 permutations are drawn to begin "
            "with. Write 20000 or more; 20000 draws once. (message 40)"
        ),
    ),
    (
        "permutations: 20000",
        "budget: {seconds: 0}",
        (
            "s.yaml:78:48: inference.p_value.budget.seconds: 0 is not possible here. Write a number more than 0 and at "
            "most 86400. (message 31)"
        ),
    ),
    (
        "permutations: 20000",
        "budget: {memory: 0 MiB}",
        (
            "s.yaml:78:47: inference.p_value.budget.memory: 0 MiB is not possible here. Write a whole number and its "
            "unit, MiB or GiB, up to 64 GiB; such as 1 GiB. (message 31)"
        ),
    ),
    (
        "permutations: 20000",
        "budget: {memory: 1 GB}",
        (
            's.yaml:78:47: inference.p_value.budget.memory: "1 GB" is not an amount of memory. Write a whole number and '
            "its unit, MiB or GiB, up to 64 GiB; such as 1 GiB. (message 30)"
        ),
    ),
    (
        "decimals: {coefficient: 3",
        "decimals: {coeficient: 3",
        (
            's.yaml:86:14: report.decimals.coeficient: "coeficient" is not a key of report.decimals. nearest: '
            "coefficient. (message 15)"
        ),
    ),
    (
        'missing_codes: ["?"]',
        "missing_codes: [Poor]",
        (
            's.yaml:46:5: variables.liking.missing_codes: "Poor" is a code for missing here and a label of '
            "variables.liking. Strike it here or there. (message 40)"
        ),
    ),
    (
        '{"Gd.": Good}',
        "{Fair: Good}",
        (
            's.yaml:45:29: variables.liking.other_spellings: "Fair" is itself a label of lowest_to_highest. Strike it '
            "here or there. (message 40)"
        ),
    ),
)


@pytest.mark.parametrize(("old", "new", "expected"), FOUND_IN_PANEL)
def test_one_mistake_in_a_larger_spec_gives_its_own_message(old: str, new: str, expected: str) -> None:
    """A fault between two keys names the key to change, wherever the other one stands."""
    assert expected in spec_messages(changed(PANEL, (old, new)))


def test_all_faults_come_at_once_and_in_file_order() -> None:
    """Wrong words, missing keys, unknown keys and contradictions are told together, first line first."""
    text = changed(
        PLANKTON,
        ("    file: ", "    decimal_mark: x\n    fil: "),
        ("    unit: m\n", ""),
        ("column: secchi", "colum: secchi"),
        ("[chlorophyll, clarity]", "[chlorophyl, clarity]"),
        ("role: primary", "role: main"),
        ("alpha: 0.05", "alpha: 2\n  p_value: {by: permutation}"),
    )
    found = spec_messages(text)
    assert [message.split(" ")[0].rstrip(":") for message in found] == [
        "s.yaml:7:3",
        "s.yaml:8:19",
        "s.yaml:9:5",
        "s.yaml:21:3",
        "s.yaml:21:3",
        "s.yaml:22:5",
        "s.yaml:27:15",
        "s.yaml:29:11",
        "s.yaml:32:10",
        "s.yaml:33:3",
    ]


def test_a_faulty_key_gives_no_second_message_through_another() -> None:
    """What cannot be read is not compared with other keys: one mistake, one message."""
    text = changed(PLANKTON, ("    file:", "    decimal_mark: x\n    thousands_mark: .\n    file:"))
    assert len(spec_messages(text)) == 1
    assert len(spec_messages(changed(PANEL, ("column: {table: tasting", "column: {table: tastings")))) == 1


def test_a_sound_spec_keeps_the_places_of_its_parts() -> None:
    """Each part of a spec knows the line on which its key stands, so that the data can be held against it."""
    spec = read_spec(PLANKTON, "studies/lake/study.yaml")
    assert spec.variables["clarity"].place == Place("studies/lake/study.yaml", 20, 3)
    assert spec.inference.place == Place("studies/lake/study.yaml", 31, 1)
    assert spec.requirements.place == Place("studies/lake/study.yaml")


def test_a_column_may_be_written_in_three_ways() -> None:
    """A name alone, a table and a name with a slash between, and the two as keys mean the same column."""
    ways = ("secchi", "survey / secchi", "{table: survey, name: secchi}", "{name: secchi}")
    read = [read_spec(changed(PLANKTON, ("column: secchi", f"column: {way}")), "s.yaml") for way in ways]
    assert {(spec.variables["clarity"].table, spec.variables["clarity"].column) for spec in read} == {
        ("survey", "secchi")
    }


def test_the_first_data_row_follows_names_and_units() -> None:
    """Without first_data_row, data begin below whichever of names and units stands lower."""
    text = changed(PLANKTON, ("    file:", "    column_names_in_row: 4\n    units_in_row: 6\n    file:"))
    assert read_spec(text, "s.yaml").data["survey"].first_data_row == 7


def test_an_empty_file_says_what_to_write() -> None:
    """A spec without keys is refused as such, whether empty, a list or a word."""
    expected = [
        (
            "s.yaml: no keys stand in the file. Write the keys study, data, rows, variables, associations and inference. "
            "(message 25)"
        )
    ]
    assert [spec_messages(text) for text in ("", "# nothing yet\n", "[]", "word")] == [expected] * 4


def test_a_byte_order_mark_moves_no_column() -> None:
    """A mark at the beginning of the file is not counted as a character."""
    assert spec_messages("\ufeffstudi: 1\n")[-1].startswith('s.yaml:1:1: studi: "studi" is not a key of a spec.')


def test_an_error_survives_its_way_to_another_process() -> None:
    """The faults of an error can be taken apart again, with plain numbers in them."""
    with pytest.raises(InputError) as caught:
        read_spec("study: 1", "s.yaml")
    assert all(type(fault.number) is int for fault in caught.value.faults)
    assert messages(lambda: (_ for _ in ()).throw(caught.value)) == [str(fault) for fault in caught.value.faults]
