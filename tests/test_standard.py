"""Standard reaction properties against published sets of data."""

from __future__ import annotations

import csv
import math
from collections import defaultdict
from pathlib import Path

import pytest

import thermofuncs
from thermofuncs.errors import GibbsEnergyOfAnotherTemperature
from thermofuncs.units import R

REFERENCE = Path(__file__).parent / "reference"
LN10 = math.log(10.0)
OWN = "NASA-9 2021"
# the coefficients were fitted with R = 8.31451 J/(mol K) and are scaled to the CODATA R, 5.7e-6 below it
SCALED = 7e-6
HALF_OF_SIX_DECIMALS = 5.000001e-7
HALF_OF_FIVE_DECIMALS = 5.000001e-6
WIDEST = 0.25
# Holland & Powell 2011 fitted phase equilibria at high pressure: their ΔrH° of calcination lies 1.59 kJ/mol
# above ours at 298.15 K, which is 0.28 in log10 K there and fades to 0.04 in all at 1000 K
WIDER = {("lime calcination", "Holland & Powell 2011", 298.15): 0.33}
# the largest distance in log10 K from ours to each other source over the temperatures, and where it is
DISTANCES = {
    "water-gas shift": {
        "NASA TM-4513": "+0.001 at 298.15 K", "Burcat": "+0.001 at 298.15 K",
        "chemicals 1.5": "-0.003 at 298.15 K", "NIST-JANAF 1998": "+0.004 at 298.15 K",
    },
    "methanol synthesis": {
        "NASA TM-4513": "-0.005 at 1500 K", "Burcat": "+0.056 at 298.15 K",
        "chemicals 1.5": "-0.040 at 298.15 K",
    },
    "SO2 oxidation": {
        "NASA TM-4513": "-0.017 at 298.15 K", "Burcat": "-0.017 at 298.15 K",
        "chemicals 1.5": "-0.020 at 298.15 K", "NIST-JANAF 1998": "-0.018 at 298.15 K",
    },
    "lime calcination": {
        "NASA TM-4513": "-0.080 at 298.15 K", "chemicals 1.5": "-0.184 at 298.15 K",
        "Helgeson et al. 1978": "-0.057 at 298.15 K", "Holland & Powell 2011": "-0.320 at 298.15 K",
    },
    "Boudouard": {"NASA TM-4513": "-0.002 at 298.15 K", "NIST-JANAF 1998": "-0.007 at 298.15 K"},
    "NO formation": {
        "NASA TM-4513": "+0.000 at 298.15 K", "Burcat": "+0.000 at 298.15 K",
        "chemicals 1.5": "+0.034 at 298.15 K", "NIST-JANAF 1998": "+0.172 at 298.15 K",
    },
    "N2O4 dissociation": {
        "NASA TM-4513": "-0.001 at 1500 K", "chemicals 1.5": "+0.018 at 1000 K",
        "NIST-JANAF 1998": "+0.020 at 800 K",
    },
    "water formation": {
        "NASA TM-4513": "-0.001 at 800 K", "Burcat": "-0.001 at 800 K",
        "chemicals 1.5": "-0.005 at 298.15 K", "NIST-JANAF 1998": "+0.001 at 298.15 K",
    },
    "methane combustion": {
        "NASA TM-4513": "+0.003 at 1500 K", "Burcat": "+0.034 at 1500 K",
        "chemicals 1.5": "+0.024 at 1500 K", "NIST-JANAF 1998": "-0.035 at 298.15 K",
    },
    "ethane dehydrogenation": {
        "NASA TM-4513": "+0.001 at 1500 K", "Burcat": "+0.001 at 1500 K",
        "chemicals 1.5": "+0.003 at 298.15 K",
    },
    "HCl formation": {
        "NASA TM-4513": "-0.001 at 1500 K", "Burcat": "-0.000 at 1000 K",
        "chemicals 1.5": "-0.025 at 298.15 K", "NIST-JANAF 1998": "+0.001 at 500 K",
    },
}

Row = dict[str, str]


def rows_of(name: str) -> list[Row]:
    """The rows of a reference file, its header of # lines left out."""
    lines = (REFERENCE / name).read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


AGREEMENT = rows_of("agreement.csv")
TRAP = rows_of("trap.csv")
EQUATIONS = {row["reaction"]: row["equation"] for row in AGREEMENT}
OWN_ROWS = [row for row in AGREEMENT if row["source"] == OWN]
OTHER_ROWS = [row for row in AGREEMENT if row["source"] != OWN]


def label(row: Row) -> str:
    """The name of a case."""
    return f"{row['reaction']} at {row['T_K']} K"


def test_the_references_are_whole() -> None:
    """The agreement file holds 249 rows of eleven reactions, 55 of our data; the trap file 44."""
    assert (len(AGREEMENT), len(OWN_ROWS), len(EQUATIONS), len(TRAP)) == (249, 55, 11, 44)
    assert {row["reaction"] for row in TRAP} == set(EQUATIONS)


@pytest.mark.parametrize("row", OWN_ROWS, ids=label)
def test_own_data_is_met_to_the_printed_digits(row: Row) -> None:
    """ΔrH°, ΔrS° and ΔrG° computed elsewhere from the same coefficients are met to half the last digit."""
    temperature = float(row["T_K"])
    for function, column in (("DRH", "dH_kJ"), ("DRS", "dS_J_K"), ("DRG", "dG_kJ")):
        ours = thermofuncs.call(function, row["equation"], temperature)
        assert ours == pytest.approx(float(row[column]), rel=0, abs=HALF_OF_SIX_DECIMALS)
    published = float(row["log10K"])
    assert thermofuncs.call("LGK", row["equation"], temperature) == pytest.approx(
        published, rel=0, abs=SCALED * abs(published) + HALF_OF_SIX_DECIMALS
    )


@pytest.mark.parametrize("row", OTHER_ROWS, ids=lambda row: f"{label(row)}, {row['source']}")
def test_other_sources_are_near(row: Row) -> None:
    """No other source lies further than 0.25 in log10 K, but for the one with its reason beside it."""
    temperature = float(row["T_K"])
    widest = WIDER.get((row["reaction"], row["source"], temperature), WIDEST)
    ours = thermofuncs.call("LGK", row["equation"], temperature)
    assert abs(float(row["log10K"]) - ours) <= widest


def test_distances_to_other_sources() -> None:
    """The largest distance in log10 K to each other source is as listed for each reaction."""
    found: dict[str, dict[str, tuple[float, str]]] = defaultdict(dict)
    for row in OTHER_ROWS:
        distance = float(row["log10K"]) - thermofuncs.call("LGK", row["equation"], float(row["T_K"]))
        known = found[row["reaction"]].get(row["source"], (0.0, ""))
        if abs(distance) > abs(known[0]):
            found[row["reaction"]][row["source"]] = (distance, row["T_K"])
    listed = {
        reaction: {source: f"{d:+.3f} at {t} K" for source, (d, t) in sources.items()}
        for reaction, sources in found.items()
    }
    assert listed == DISTANCES


@pytest.mark.parametrize("row", TRAP, ids=label)
def test_constant_properties_go_wrong_by_the_published_sizes(row: Row) -> None:
    """Log10 K in full, with ΔrG°, ΔrH° or ΔrCp° of 298.15 K held constant, and at 1 atm, is the table's."""
    equation, temperature = EQUATIONS[row["reaction"]], float(row["T_K"])
    call = thermofuncs.call
    gibbs_energy, enthalpy, ln_k, heat_capacity = (
        call(name, equation, 298.15) for name in ("DRG", "DRH", "LNK", "DRCP")
    )
    found = {
        "log10K_full": -call("DRG", equation, temperature) * 1000 / (R * temperature * LN10),
        "logK_dG298_frozen": -gibbs_energy * 1000 / (R * temperature * LN10),
        "logK_const_dH": call("LNKAT", ln_k, 298.15, temperature, enthalpy) / LN10,
        "logK_const_dCp": call("LNKAT", ln_k, 298.15, temperature, enthalpy, heat_capacity) / LN10,
    }
    for column, value in found.items():
        published = float(row[column])
        bound = SCALED * abs(published) + HALF_OF_FIVE_DECIMALS
        assert value == pytest.approx(published, rel=0, abs=bound), column
    full = found["log10K_full"]
    errors = {
        "err_dG298": found["logK_dG298_frozen"] - full,
        "err_const_dH": found["logK_const_dH"] - full,
        "err_const_dCp": found["logK_const_dCp"] - full,
        # one library holds 1 atm for the standard pressure: its log10 K is larger by -Σν log10(1.01325)
        "err_1atm_vs_1bar": call("LGK", equation, temperature, None, "atm") - full,
    }
    for column, value in errors.items():
        published = float(row[column])
        bound = SCALED * max(abs(published), 1.0) + HALF_OF_FIVE_DECIMALS
        assert value == pytest.approx(published, rel=0, abs=bound), column
    # ΔrCp° is printed to five decimals
    assert heat_capacity == pytest.approx(float(row["dCp298_J_K"]), rel=0, abs=HALF_OF_FIVE_DECIMALS)


@pytest.mark.parametrize("row", TRAP, ids=label)
def test_a_gibbs_energy_of_298_k_is_refused_elsewhere(row: Row) -> None:
    """LNKFROMDRG refuses the Gibbs energy of 298.15 K at every other temperature, and takes the right one."""
    equation, temperature = EQUATIONS[row["reaction"]], float(row["T_K"])
    frozen = thermofuncs.call("DRG", equation, 298.15)
    with pytest.raises(GibbsEnergyOfAnotherTemperature) as caught:
        thermofuncs.call("LNKFROMDRG", frozen, temperature, 298.15)
    assert caught.value.sentence == (
        f"drg belongs to 298.15 K and t is {temperature:.10g} K; ΔrG° changes with temperature, "
        "so the two may differ by 0.5 K at most. Take ln K at 298.15 K and carry it with LNKAT."
    )
    right = thermofuncs.call("DRG", equation, temperature)
    assert thermofuncs.call("LNKFROMDRG", right, temperature, temperature) == pytest.approx(
        thermofuncs.call("LNK", equation, temperature), rel=1e-13
    )
