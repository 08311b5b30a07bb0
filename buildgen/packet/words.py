"""All words of the packet, in one place: translate this module and the packet is translated."""

from __future__ import annotations

PROGRAM = "buildgen"
PACKET = "build packet"
PAGE_OF = "page {page} of"
NOT_APPROVAL_SHORT = "A calculation, not an airworthiness approval"
REVISION = "Revision {revision}, definition {hash}"

# ------------------------------------------------------------------ title page
FIGURES = "Key figures"
SPAN, AREA, MASS = "Span", "Wing area", "Mass, ready to fly"
LOADING, CG, MARGIN = "Wing loading", "Centre of gravity", "Static margin"
MOTORS, PARTS = "Motors", "Parts"
BEHIND_LE = "aft of the root leading edge"
AHEAD_OF_LE = "ahead of the root leading edge"
FROM_ABOVE, FROM_FRONT, FROM_LEFT = "From above", "From the front", "From the left"
CG_KEY = "centre of gravity"
RANGE_KEY = "where it shall be"
NEUTRAL_KEY = "neutral point"
ESTIMATED = (
    "Masses are the sums over every part, estimated where not weighed; ± is one standard "
    "deviation. Weigh the finished aircraft before its first flight."
)
SCALE = "1 : {scale}"

# ------------------------------------------------------------------ weights and balance
BALANCE = "Weights and balance"
BALANCE_TABLE = "By group"
GROUP, ARM, MOMENT = "Group", "Arm, mm", "Moment, g·mm"
MASS_G, SIGMA_G = "Mass, g", "± g"
TOTAL = "Whole aircraft"
ARM_NOTE = "Arms are counted aft from the leading edge of the wing's root chord."
CG_TEXT = (
    "The centre of gravity lies {cg} ± {sigma} mm {where}, "
    "that is at {percent} % of the mean aerodynamic chord ({mac} mm long, its leading edge "
    "at {mac_le} mm)."
)
NEUTRAL_TEXT = "The neutral point lies at {np} mm; the static margin is {margin} %."
TARGET_TEXT = "It shall lie between {fore} and {aft} mm: {verdict}"
IN_RANGE = "it does, by {room} mm to the nearer limit."
IN_RANGE_BARELY = (
    "it does, but by {room} mm only, less than its own uncertainty: weigh before you fly."
)
TOO_FAR_FORE = "it lies {by} mm too far forward. Do not fly it like this."
TOO_FAR_AFT = "it lies {by} mm too far aft. Do not fly it like this."
MOVABLE = "What may slide"
ITEM, AT, FROM, TO = "Item", "x, mm", "foremost", "aftmost"
BALLAST = "Ballast"
BALLAST_TEXT = "{item}: {mass} g at x = {x} mm."
CHECKS = "Checks"
CHECKS_NOTE = (
    "Worst first. Every check names its method and source; a pass is the answer of that method "
    "to the figures given, no more."
)
CHECK, FOUND, LIMIT, BASIS, VERDICT = "Check", "Found", "Limit", "Method and source", "Verdict"
VERDICTS = {"pass": "✓ pass", "warn": "▲ warn", "fail": "✕ FAIL"}
COUNTS = "{fail} failed, {warn} with a warning, {passed} passed."
NO_CHECKS = "No check was made."

# ------------------------------------------------------------------ bill of materials
BILL = "Bill of materials"
MAKE, STOCK, BUY = "To make", "Stock to buy", "To buy"
SECTIONS = {"make": MAKE, "stock": STOCK, "buy": BUY}
QUANTITY, SIZE, MATERIAL = "Quantity", "Size", "Material"
PIECES, SHEETS_UNIT, LENGTHS_UNIT = "pieces", "sheets", "lengths"
ONE = {PIECES: "piece", SHEETS_UNIT: "sheet", LENGTHS_UNIT: "length"}
CUT_PARTS, STICK_PARTS = "Cut parts", "Sticks and tubes"
PRINTED_PARTS, COVERED_PARTS = "Printed parts", "Covering"
SHEET_STOCK, STICK_STOCK, FILAMENT = "Sheet", "Length", "Filament"
COVERING_STOCK = "Covering, net; add overlaps"
ALLOWANCE = "Estimate"
STOCK_NOTE = (
    "Sheets and lengths are what the cutting plans use; a spare of each thin sheet is cheap. "
    "Filament is what the parts weigh, without skirts, supports and failed prints."
)
BUY_NOTE = "Equal things are counted together; masses are of the whole line."

# ------------------------------------------------------------------ sheets, sticks, prints
SHEETS = "Cut sheets"
SHEET_FACTS = (
    "{parts}, {mass} g · {used} % of the sheet used · cut length {length} m · "
    "kerf {kerf} mm"
)
GRAIN = "grain"
REST_EMPTY = "the other half is empty"
PART_COUNT = ("{count} part", "{count} parts")
ON_SHEET = "Parts on this sheet, by their numbers"
STICKS = "Sticks and tubes"
STICK_NOTE = (
    "Each bar is one length of stock, drawn to scale in its row; cut from the left, with {saw} mm "
    "for each cut. The hatched end is left over. Lengths in mm."
)
LEFT_OVER = "left"
PRINTS = "Printed parts"
PRINT_FACTS = "{mass} g · {size} mm · {material}"
PRINT_COPIES = "print {count}: {ids}"
PRINT_NOTE = (
    "Masses count perimeters, skins and infill as the definition gives them. Pictures stand as "
    "the part lies on the bed."
)

# ------------------------------------------------------------------ build steps
STEPS = "Build steps"
STEP = "{number}  {name}"
STEP_NOTE = (
    "Parts that are new in a step are drawn strongly, earlier ones pale. Fit everything dry "
    "before any glue, tick what is done."
)
PRINT_FILE = "file {stem}"
SHEET_PLACE = "{sheet}, no. {number}"
SHEET_OF, LENGTH = "Where from", "Length, mm"
ID, NAME, PROCESS, STEP_COLUMN = "Id", "Name", "Made by", "Step"
INDEX = "Parts index"
PROCESSES = {
    "cut": "cut",
    "stick": "sawn",
    "print": "printed",
    "cover": "covered",
    "bought": "bought",
    "allowance": "estimate",
}
OF_MAC = "of the mean aerodynamic chord"
SHEETS_COUNT = "on {count} cut sheets"

# ------------------------------------------------------------------ before the first flight
FLIGHT = "Before the first flight"
FLIGHT_NOTE = (
    "Measure, write down, compare. If the mass differs by more than about 10 %, or the balance "
    "lies outside its range, put that right and work the figures out anew before flying."
)
QUANTITY_NAMED, PLANNED, MEASURED, BY = "What", "This packet says", "Measured", "By, date"
SPAN_ROW, MASS_ROW, CG_ROW = "Span", "Mass, ready to fly", "Centre of gravity, battery in place"
RANGE_ROW, SIDE_ROW = "Range of the centre of gravity", "Sideways balance, from the middle"
ITEM_ROW = "{item}, its middle"
FROM_LE = "{x} mm from the root leading edge"

# ------------------------------------------------------------------ cautions
CAUTIONS = "Before you begin"
NOT_APPROVAL = (
    "Nothing in this packet is an airworthiness approval. Its figures are calculations from the "
    "definition, not measurements; whoever builds and flies the aircraft verifies them and "
    "answers for it. Where makers' instructions, the rules of a club or the law differ from this "
    "packet, they prevail."
)
CAUTION_GROUPS: tuple[tuple[str, str, tuple[str, ...]], ...] = (
    ("cut", "At the laser and the knife", (
        "Run the extraction, keep the lid closed, stay with the machine and have an extinguisher "
        "within reach: wood chars and can catch fire. Keep the bed clean.",
        "Never cut PVC or other vinyl, ABS, polycarbonate, PTFE, foams of polystyrene or "
        "polypropylene, glass or cured carbon laminate, or a sheet of unknown make.",
        "Let plywood air after cutting, its glue irritates. Measure the kerf on a small test cut "
        "of the very sheet before the whole set is cut.",
        "Change blades often, cut away from yourself and support narrow parts.",
    )),
    ("print", "At the printer", (
        "Ventilate, most of all with ABS, ASA and nylon. PLA softens at 50 to 60 °C: keep it away "
        "from hot motors and sunny cars.",
        "Try every printed mount on the ground, tied down, at full throttle before it flies.",
    )),
    ("dust", "Sanding", (
        "Sand with extraction and a fine-particle mask (FFP2, N95 or better): wood dust harms the "
        "lungs, and that of some woods causes allergy. Vacuum, do not blow; wash before eating.",
        "Cut carbon and glass wet or with extraction at the tool, with mask, goggles and gloves. "
        "Seal the ends against splinters. Carbon dust conducts: keep it off electronics.",
    )),
    ("glue", "Gluing, painting, covering", (
        "Cyanoacrylate bonds skin and eyes, irritates, and heats up on cotton: eye protection, "
        "fresh air, and never pull bonded skin or lids apart.",
        "Epoxy and its hardener can cause a lasting allergy: gloves, nothing on the skin, and no "
        "sanding before it is cured.",
        "Dope, thinner and spray paint burn and are harmful to breathe: outdoors or well aired, "
        "no flame. Irons, heat guns and soldering irons burn.",
    )),
    ("battery", "Batteries", (
        "Charge lithium packs with a charger made for them, set to their chemistry and cell "
        "count, balance lead connected, at 1C unless the maker allows more; on a surface that "
        "cannot burn, never alone, never inside the aircraft.",
        "4.20 V per cell is the upper limit. Land with about 20 % left; below about 3.0 V under "
        "load a cell is damaged. Store at about 3.8 V per cell, cool, dry, in a container that "
        "holds a fire and vents gas.",
        "Take a swollen, dented, hot or punctured pack out of use; after a crash watch it "
        "outdoors. Cover bare plugs and check polarity before every first connection.",
    )),
    ("propeller", "Motors and propellers", (
        "Propellers off for all work at the bench. A motor is live whenever a battery is "
        "connected: arm last, disarm first, and test throttle cut and fail-safe.",
        "Hands, faces, hair and sleeves stay out of the disc. Stand behind it, keep onlookers "
        "behind the aircraft and never in the plane of rotation; wear eye protection.",
        "Never repair or reuse a nicked or bent propeller; balance it, fit it the right way "
        "round and stay below its greatest speed. Measure the current on the first run.",
    )),
    ("before", "Before the first flight", (
        "Weigh the finished aircraft. If it differs by more than about 10 % from this packet, "
        "work out stall speed and wing loading anew.",
        "Check the balance ready to fly, with the battery in place, and begin at the forward end "
        "of the range. Fix battery and ballast so that they cannot move.",
        "Check lateral balance, warps, incidence and thrust line, left against right; every "
        "control for direction, centre, throw and play; hinges and horns by pulling.",
        "Make a range check, motor off and running. See that the supply can feed all servos "
        "stalled at once.",
    )),
    ("fly", "Flying", (
        "Follow the aviation authority of the country (registration, operator and pilot, height, "
        "distance, airspace), the rules of the club and of the landowner; be insured.",
        "Choose an open site clear of people, roads, animals, power lines and aerodromes; keep "
        "the aircraft in sight and never fly over people. Light wind, low rates, a helper, and "
        "room to land straight ahead.",
        "After a hard landing look over frame, mounts, battery and control runs before flying "
        "again. Children only with an adult in charge: this is not a toy.",
    )),
)
CAUTION_SEEN = "General practice of the workshop and the flying field; no single source."

# ------------------------------------------------------------------ dry fit
DRY_FIT = "Dry fit"
FIT_TEXT = (
    "The kit was put together on the computer, every part as a solid in its place: {pairs} pairs "
    "that lie near each other, none of which may share more than {limit} mm³; {joints} joints, "
    "each measured; {ways} ways in, each swept in the order of the build steps."
)
JOINT, COUNT = "Joint", "Number"
LEAST_PLAY, MOST_PLAY = "Least play, mm", "Greatest, mm"
CONTACT, FIT_BAND = "Least contact, mm²", "Limit, mm"
FINDINGS, FINDING, FIT_SAYS = "What does not fit", "Finding", "Where"
NO_FINDINGS = "Nothing: every pair, joint and way in is as it should be."
FAULTS = {
    "clash": "one space", "tight": "too tight", "loose": "too loose",
    "no contact": "no contact", "no way in": "no way in",
}

PLANS = "full-size plans"
PLAN_TILE = "row {row} of {rows}, column {column} of {columns}"
PLAN_BAR = "measures 100 mm when printed at 100 %, without fitting to the page"
