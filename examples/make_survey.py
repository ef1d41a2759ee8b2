#!/usr/bin/env python3
"""Writes the demonstration's data: an invented household energy survey of an invented island county, Ternholm.

    examples/make_survey.py            writes ternholm_energy.csv beside this script
    examples/make_survey.py -          writes it to standard output

No person, place or figure is real. All arithmetic is in integers (cents, tenths of a square metre, tenths of a per cent)
and the random numbers come from the few lines below, so every Python 3 on every machine writes the same bytes; a test
compares them with the file in the repository. What is hidden in the data, on purpose, is listed in README.md.
"""
import pathlib
import sys

HOUSEHOLDS = 2400
SEED = 20240917
DISTRICTS = ("harbour", "highmoor", "northsound", "saltings", "westerby")
PEAT_ROWS = (311, 1204, 2076)  # households, from 1
MISTYPED_ROW = 1733
SQUARE_FEET_PER_SQUARE_METRE_E7 = 107_639_104

COLUMNS = (
    "household,interview_year,birth_year,age,residents,income,"
    "district_harbour,district_highmoor,district_northsound,district_saltings,district_westerby,"
    "tenure,build_year,floor_area_m2,floor_area_sqft,rooms,rooms_heated,rooms_unheated,insulation_cm,heating,"
    "cost_heating,cost_lighting,cost_cooking,cost_energy,share_rent,share_energy,share_upkeep,"
    "annual_kwh,weight"
).split(",")

# Columns in which an interviewer now and then left a cell empty, with the rate in 1,000.
EMPTY_CELLS = {"income": 20, "build_year": 14, "insulation_cm": 20, "share_upkeep": 9, "annual_kwh": 10}


class Random:
    """SplitMix64 (Steele, Lea & Flood 2014, "Fast splittable pseudorandom number generators"): 64-bit integers only."""

    def __init__(self, seed):
        self.state = seed

    def below(self, bound):
        """A number from 0 to bound - 1. The bias, bound / 2**64, is of no account here."""
        mask = (1 << 64) - 1
        self.state = (self.state + 0x9E3779B97F4A7C15) & mask
        z = self.state
        z = ((z ^ (z >> 30)) * 0xBF58476D1CE4E5B9) & mask
        z = ((z ^ (z >> 27)) * 0x94D049BB133111EB) & mask
        return (z ^ (z >> 31)) % bound

    def between(self, low, high):
        return low + self.below(high - low + 1)

    def bell(self, spread):
        """About normal with standard deviation `spread`: the sum of 12 uniform numbers, less its mean."""
        total = sum(self.below(2001) - 1000 for _ in range(12))
        return total * spread // 2000

    def choose(self, weights):
        """An index, with probability proportional to its weight."""
        draw = self.below(sum(weights))
        for index, weight in enumerate(weights):
            if draw < weight:
                return index
            draw -= weight
        raise AssertionError("draw is below the sum of the weights")


def clamp(value, low, high):
    return max(low, min(high, value))


def rounded(numerator, denominator):
    """numerator / denominator to the nearest integer, halves up (both positive)."""
    return (2 * numerator + denominator) // (2 * denominator)


def decimal(value, places):
    unit = 10**places
    return f"{value // unit}.{value % unit:0{places}d}"


def people(random):
    interview_year = 2004 + 2 * random.below(11)
    age = clamp(52 + random.bell(17), 19, 94)
    residents = 1 + random.choose((31, 35, 15, 12, 5, 2))
    income = clamp(2450 + 340 * residents - (age - 48) ** 2 // 2 + random.bell(780), 620, 11000)
    return {
        "interview_year": interview_year,
        "birth_year": interview_year - age,
        "age": age,
        "residents": residents,
        "income": income,
    }


def dwelling(random, row, home):
    district = random.choose((31, 14, 20, 16, 19))
    for index, name in enumerate(DISTRICTS):
        row[f"district_{name}"] = int(index == district)
    row["tenure"] = ("owner", "tenant", "shared")[random.choose((58, 33, 9))]
    row["build_year"] = clamp(1956 + 6 * (district == 4) + random.bell(22), 1874, row["interview_year"] - 1)
    rooms = clamp(2 + row["residents"] // 2 + random.choose((8, 20, 30, 24, 12, 6)), 1, 12)
    if random.below(100) < 4:
        rooms = 1
    unheated = min(rooms - 1, random.choose((46, 27, 17, 10)))
    tenths = clamp(300 + 150 * rooms + random.bell(340), 180, 3900)
    row["floor_area_m2"] = decimal(tenths, 1)
    row["floor_area_sqft"] = rounded(tenths * SQUARE_FEET_PER_SQUARE_METRE_E7, 10**8)
    row["rooms"], row["rooms_heated"], row["rooms_unheated"] = rooms, rooms - unheated, unheated
    row["insulation_cm"] = clamp(6 + (row["build_year"] - 1940) // 8 + random.bell(5), 0, 32)
    row["heating"] = ("oil", "electric", "heat pump", "wood")[random.choose((44, 27, 19, 10))]
    if home in PEAT_ROWS:
        row["heating"] = "peat"
    return tenths, district


def running_costs(random, row, tenths):
    """Cents a month. The total is the sum of the three parts to the cent."""
    price = {"oil": 31, "electric": 43, "heat pump": 19, "wood": 24, "peat": 22}[row["heating"]]
    heating = tenths * price * (46 - row["insulation_cm"]) // 300 + random.bell(1300)
    heating = clamp(heating, 850, 90000)
    lighting = clamp(520 + 230 * row["residents"] + tenths // 3 + random.bell(480), 205, 9000)
    cooking = clamp(980 + 300 * row["residents"] + random.bell(520), 240, 9000)
    row["cost_heating"], row["cost_lighting"] = decimal(heating, 2), decimal(lighting, 2)
    row["cost_cooking"] = decimal(cooking, 2)
    row["cost_energy"] = decimal(heating + lighting + cooking, 2)
    return heating + lighting + cooking


def housing_shares(random, row):
    """Per cent of the cost of housing, each rounded by itself to one decimal, so that they sum to about 100."""
    rent = {"owner": 380, "tenant": 610, "shared": 520}[row["tenure"]]
    parts = [max(40, centre + random.bell(spread)) for centre, spread in ((rent, 110), (260, 80), (170, 60))]
    tenths = [rounded(1000 * part, sum(parts)) for part in parts]
    row["share_rent"], row["share_energy"], row["share_upkeep"] = (decimal(share, 1) for share in tenths)


def consumption_and_weight(random, row, tenths, district):
    factor = {"oil": 100, "electric": 92, "heat pump": 38, "wood": 108, "peat": 112}[row["heating"]]
    warmth = tenths * factor * (44 - row["insulation_cm"]) // 320
    row["annual_kwh"] = max(700, warmth + 640 * row["residents"] + 6 * row["age"] + random.bell(1150))
    row["weight"] = decimal(clamp((96, 141, 88, 127, 104)[district] + random.bell(22), 35, 240), 2)


def household(random, home):
    row = {"household": f"T{home:04d}", **people(random)}
    tenths, district = dwelling(random, row, home)
    running_costs(random, row, tenths)
    housing_shares(random, row)
    consumption_and_weight(random, row, tenths, district)
    for column, rate in EMPTY_CELLS.items():
        # Drawn for every row, so that the rows spared below do not shift the numbers of the rows after them.
        if random.below(1000) < rate and home not in PEAT_ROWS and home != MISTYPED_ROW:
            row[column] = ""
    if home == MISTYPED_ROW:
        row["rooms"] = row["rooms"] + 3  # the finger slipped by one row of the number pad
    return row


def survey():
    random = Random(SEED)
    lines = [",".join(COLUMNS)]
    for home in range(1, HOUSEHOLDS + 1):
        row = household(random, home)
        lines.append(",".join(str(row[column]) for column in COLUMNS))
    return "\n".join(lines) + "\n"


def main(arguments):
    if arguments == ["-"]:
        sys.stdout.buffer.write(survey().encode("ascii"))
    elif not arguments:
        pathlib.Path(__file__).with_name("ternholm_energy.csv").write_bytes(survey().encode("ascii"))
    else:
        sys.exit(__doc__)


if __name__ == "__main__":
    main(sys.argv[1:])
