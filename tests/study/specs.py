"""Two invented studies as spec texts, from which the tests of this room start."""

PLANKTON = """\
study:
  number: "LK-031"
  title: Chlorophyll and water clarity in Lake Ormel
  client: Ormel Water Board
  question: Is the water less clear where chlorophyll is higher?
data:
  survey:
    file: received/survey.csv
    missing_codes: ["", "n/a"]
rows:
  one_row_is: one station in the August survey
  repeated_within: not applicable
  time_order: not applicable
variables:
  chlorophyll:
    column: chl_a
    label: Chlorophyll a
    unit: µg/L
    scale: measured
  clarity:
    column: secchi
    label: Secchi depth
    unit: m
    scale: measured
associations:
  A1:
    between: [chlorophyll, clarity]
    question: Does clarity fall as chlorophyll rises?
    role: primary
    hypothesis: {expected_sign: negative}
inference:
  alpha: 0.05
"""

PANEL = """\
study:
  number: "SP-7"
  title: Crust colour and liking of rye bread
  client: Brookfield Bakers
  question: |
    Do tasters like
    darker crusts more?
  population: Visitors of the spring market
  rows_were_fixed_by: the client, before tasting began
  prepared_by: {name: J. Okafor, role: statistician}
  checked_by: {name: R. Lindqvist}
data:
  tasting:
    file: received/2026-03-02/tasting.txt
    separator: tab
    decimal_mark: ","
    thousands_mark: "."
    text_encoding: windows-1252
    comment_mark: "#"
    column_names_in_row: 2
    units_in_row: 3
    first_data_row: 5
    last_data_row: 60
    missing_codes: {"": not asked, NA: refused, -9: lost}
    received_on: 2026-03-02
    received_from: Brookfield Bakers
  loaves:
    file: received/loaves.csv
    missing_codes: []
rows:
  one_row_is: one taster
  repeated_within: booth
  time_order: hour
  leave_out:
    - where: {taster: 007, booth: NO}
      reason: Withdrew consent
    - where: {taster: "012"}
      reason: Tasted twice
variables:
  liking:
    column: tasting / Liking
    label: Liking
    scale: ordered
    lowest_to_highest: [Poor, Fair, Good]
    other_spellings: {"Gd.": Good}
    missing_codes: ["?"]
  colour:
    column: {table: tasting, name: L / a}
    label: Crust colour
    unit: "1"
    scale: measured
  visits:
    column: tasting / visits
    label: Earlier visits
    scale: count
  local:
    column: tasting / local
    label: Local
    scale: two-valued
    lowest_to_highest: ["no", "yes"]
associations:
  A1:
    between: [colour, liking]
    question: Are darker crusts liked more?
    role: primary
    hypothesis: {expected_sign: positive, smallest_of_interest: 0.30}
    coefficient: Kendall tau-b
  A2:
    between: [visits, liking]
    question: Do regulars like the bread more?
    role: exploratory
    hypothesis: {expected_sign: either}
inference:
  alpha: 0.050
  sidedness: two-sided
  confidence_level: 0.9
  several_tests: {adjust: none, among: all, reason: One primary question}
  p_value: {by: permutation, permutations: 20000, seed: 9223372036854775807}
requirements:
  fewest_complete_rows: 10
  most_missing: 0.1
  most_tied: 0.6
  if_not_met: withhold all
report:
  readers: [client, court]
  decimals: {coefficient: 3, p_value: 4}
  number_style: no leading zero
  marking: Commercial in confidence
  distribution: [Brookfield Bakers, file copy]
  signatures: [prepared]
"""
