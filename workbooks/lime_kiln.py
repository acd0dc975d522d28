"""The lime kiln: decomposition pressure over temperature, start of burning, heat, slaking, checks, working."""

from __future__ import annotations

from workbooks.layout import (
    Check,
    Curve,
    Input,
    Result,
    allow,
    axis,
    checks,
    checks_met,
    closing,
    curves,
    inputs,
    results,
    section,
    title_block,
    working_table,
)
from workbooks.sheets import FIRST_COLOUR, INK, SECOND_COLOUR, Sample, Sheet

TITLE = "Lime kiln: start of burning, heat demand and slaking"
PURPOSE = (
    "Purpose: at which temperature limestone begins to give off CO2 in the kiln gas, what pressure of CO2 it reaches "
    "in the burning zone, and what heat burning and slaking need or set free per tonne. Method: K from temperature-"
    "dependent data (TF functions); CaCO3 and CaO are pure solids, so K is the pressure of CO2 in bar. Limits: pure "
    "calcite; no heat loss, no rate, no dolomite, no firing gas in the heat."
)
SAFETY = (
    "CO2 from a kiln collects in pits and enclosed spaces and suffocates without warning. Quicklime burns skin and "
    "eyes; slaking boils water and can throw hot lime; hot kiln product ignites what it touches. These are "
    "equilibrium and theoretical figures, not design or operating limits. Have them checked by a qualified person "
    "before anybody acts on them; local codes and licensed practice come first."
)
DATA_SETS = (
    "Four sets of data reach 1 bar between 1157.8 and 1159.5 K: NASA/TP-2002-211556, Helgeson et al. 1978, Holland & "
    "Powell 2011, handbook formation values; the limit is half that range"
)
HELGESON = (
    "Helgeson, Delany, Nesbitt & Bird, Am. J. Sci. 278-A (1978) 1, with CO2 of NASA/TP-2002-211556; five sets of "
    "data lie within 0.07 of one another here"
)
HOLLAND = (
    "Holland & Powell, J. Metamorphic Geol. 29 (2011) 333, with CO2 of NASA/TP-2002-211556; five sets of data "
    "lie within 0.07 of one another here"
)
GLENN = "NASA/TP-2002-211556, data file of 2021, evaluated by a reference implementation without scaling of R"
SLAKING = (
    "Handbook formation enthalpies at 298.15 K in kJ/mol: Ca(OH)2 -985.2, CaO -634.9, H2O(l) -285.8; such tables "
    "differ by about 1 (common practice)"
)
MASSES = "IUPAC abridged standard atomic weights 2021: Ca 40.078, C 12.011, O 15.999; rounding of the weights"

# T in K, log10 K by a reference implementation on the bundled coefficients
LOG_K = ((800.0, -3.433525), (1000.0, -1.201040), (1500.0, 1.660051))
CELSIUS = range(650, 1125, 25)
PRESSURES = (0.05, 0.10, 0.15, 0.20, 0.25, 0.30, 0.40, 0.50, 0.75, 1.00, 2.00, 5.00)
BURNING = (25, 200, 400, 600, 800, 850, 900, 950, 1000, 1100)

INPUTS = (
    Input("Burning of limestone", "CaCO3(s) = CaO(s) + CO2(g)", "", "", "burning", "Equation text; K = p(CO2) / 1 bar"),
    Input("Slaking of lime", "CaO(s) + H2O(l) = Ca(OH)2(s)", "", "", "slaking", "Equation text"),
    Input("Loss of water by hydrate", "Ca(OH)2(s) = CaO(s) + H2O(g)", "", "", "dehydration",
          "Equation text; K = p(H2O) / 1 bar"),
    Input("CO2 in the kiln gas", 0.25, "0.0%", "mol/mol", "kiln_fraction", "Gas analysis, invented"),
    Input("Pressure of the kiln gas, absolute", 101.3, "0.0", "see below", "kiln_reading", "Plant reading, invented"),
    Input("Unit of that pressure", "kPa", "", "", "pressure_unit", "kPa, bar, mbar, atm or psi; also of results"),
    Input("Temperature of the burning zone", 1000.0, "0", "degC", "zone_degC", "Plant reading, invented"),
    Input("CaCO3 in the dry limestone", 0.965, "0.0%", "kg/kg", "stone_purity", "Stone analysis, invented"),
    Input("Part of the CaCO3 that is burnt", 0.97, "0.0%", "kg/kg", "burnt_part", "Analysis of the lime, invented"),
    Input("Limestone fed, dry", 500.0, "0", "t/d", "stone_feed", "Belt scale, invented"),
)  # fmt: skip
EQUILIBRIUM = (
    Result("Partial pressure of CO2 in the kiln gas", '=kiln_fraction*TF.INUNIT(kiln_reading,pressure_unit,"bar")',
           "0.0000", "bar", "kiln_CO_bar"),
    Result("Limestone begins to burn there at", "=TF.TEQ(burning,kiln_CO_bar)", "0.00", "K", "start_K"),
    Result("Limestone begins to burn there at", "=start_K-273.15", "0.0", "degC", "",
           "Below it lime takes up CO2 again"),
    Result("In pure CO2 of 1 bar it begins at", "=TF.TEQ(burning)", "0.00", "K", "one_bar_K"),
    Result("In pure CO2 of 1 bar it begins at", "=one_bar_K-273.15", "0.0", "degC"),
    Result("Burning zone temperature", "=zone_degC+273.15", "0.00", "K", "zone_K"),
    Result("Pressure of CO2 over the stone there", "=TF.KEQ(burning,zone_K)", "0.000", "bar", "zone_bar",
           "K is p(CO2) in bar"),
    Result("The same in the unit of the reading", '=TF.INUNIT(zone_bar,"bar",pressure_unit)', "0.0", "as chosen"),
    Result("Affinity of burning in the kiln gas", "=TF.AFFINITY(burning,zone_K,kiln_gas)", "0.000", "kJ/mol",
           "zone_affinity", "Positive: the stone burns"),
    Result("ΔrH° in the burning zone", '=TF.DRH(burning,zone_degC&" degC")', "0.000", "kJ/mol"),
    Result("Hydrate loses its water in steam of 1 bar at", "=TF.TEQ(dehydration)", "0.00", "K"),
    Result("Cautions of the start of burning",
           '=IF(TF.CAUTIONS("TEQ",burning,kiln_CO_bar)="","none",TF.CAUTIONS("TEQ",burning,kiln_CO_bar))',
           "General", ""),
)  # fmt: skip
HEAT = (
    Result("Molar mass of CaCO3", '=TF.MOLM("CaCO3")', "0.000", "g/mol", "mass_stone"),
    Result("Molar mass of CaO", '=TF.MOLM("CaO")', "0.000", "g/mol", "mass_lime"),
    Result("ΔrH° of burning at 25 degC", '=TF.DRH(burning,"25 degC")', "0.000", "kJ/mol", "burning_enthalpy"),
    Result("Theoretical heat per tonne of CaO", "=burning_enthalpy/mass_lime", "0.0000", "GJ/t", "heat_per_tonne",
           "kJ/g = GJ/t; stone in and products out at 25 degC"),
    Result("The same in kWh per tonne", "=heat_per_tonne/3.6*1000", "0.0", "kWh/t"),
    Result("CO2 from the stone per tonne of CaO", '=TF.MOLM("CO2")/mass_lime', "0.0000", "t/t", "",
           "Without the CO2 of the fuel"),
    Result("CaO made", "=stone_feed*stone_purity*burnt_part*mass_lime/mass_stone", "0.0", "t/d", "lime_made"),
    Result("Theoretical heat flow", "=lime_made*heat_per_tonne/86.4*1000", "0", "kW", "", "1 GJ/d = 1000/86.4 kW"),
    Result("ΔrH° of slaking at 25 degC", '=TF.DRH(slaking,"25 degC")', "0.000", "kJ/mol", "slaking_enthalpy",
           "Negative: heat is set free"),
    Result("Heat of slaking per kg of CaO", "=slaking_enthalpy/mass_lime*1000", "0.0", "kJ/kg"),
    Result("Water bound per kg of CaO", '=TF.MOLM("H2O")/mass_lime', "0.0000", "kg/kg"),
    Result("ln K of slaking at 25 degC", "=TF.LNK(slaking,298.15)", "0.000", "1"),
)  # fmt: skip
CHECKS = (
    Check("Burning reaches 1 bar of CO2 at", "=one_bar_K", 1158.65, 0.85, "K", "0.00", DATA_SETS),
    Check("log10 K of burning at 1000 K", "=TF.LGK(burning,1000)", -1.198642, 0.07, "1", "0.0000", HELGESON),
    Check("log10 K of burning at 1000 K", "=TF.LGK(burning,1000)", -1.240794, 0.07, "1", "0.0000", HOLLAND),
    *(
        Check(f"log10 K of burning at {kelvin:g} K", f"=TF.LGK(burning,{kelvin:g})", value,
              round(abs(value) * 7e-6 + 5e-7, 7), "1", "0.000000", GLENN)
        for kelvin, value in LOG_K
    ),
    Check("ΔrH° of slaking at 25 degC", "=slaking_enthalpy", "=-985.2+634.9+285.8", 1.0, "kJ/mol", "0.00", SLAKING),
    Check("Molar mass of CaCO3", "=mass_stone", "=40.078+12.011+3*15.999", 0.005, "g/mol", "0.000", MASSES),
    Check("K at the start of burning is the kiln's p(CO2)", "=TF.KEQ(burning,start_K)", "=kiln_CO_bar", 1e-9, "bar",
          "0.000000"),
    Check("Affinity there = RT (ln K − ln p)", "=zone_affinity",
          '=TF.CONSTANT("R")*zone_K*(LN(zone_bar)-LN(kiln_CO_bar))/1000', 1e-9, "kJ/mol", "0.000000"),
    Check("Both ways of heating and burning at 1000 degC", "=Heat!F14", "=Heat!I14", 1e-9, "kJ/mol", "0.000000"),
    Check("p(CO2) at 900 degC, by bar and by K in kPa", "='CO2 pressure'!G16",
          "=TF.KCONVERT('CO2 pressure'!E16,\"standard\",\"p in kPa\",1,'CO2 pressure'!C16)", 1e-9, "kPa", "0.0000"),
)  # fmt: skip


def build(sample: Sample) -> None:
    """All sheets."""
    _calculation(sample)
    _pressure(sample)
    _heat(sample)
    sheet = checks(sample, CHECKS)
    sheet.expect("C5", 1158.65, 0.85, "published", DATA_SETS, "K")
    sheet.expect("C6", -1.198642, 0.07, "published", HELGESON)
    sheet.expect("C7", -1.240794, 0.07, "published", HOLLAND)
    for row, (_, value) in enumerate(LOG_K, 8):
        sheet.expect(f"C{row}", value, abs(value) * 7e-6 + 5e-7, "derived", GLENN)
    sheet.expect("C11", -64.5, 1.0, "published", SLAKING, "kJ/mol")
    sheet.expect("C12", 100.086, 0.005, "published", MASSES, "g/mol")
    _working(sample)


def _calculation(sample: Sample) -> None:
    sheet = sample.sheet("Calculation", [2, 44, 22, 13, 17, 74])
    plant = "Tarnbeck Works, lime kiln K-3 and hydrator. The plant is invented and so are its readings."
    title_block(sheet, TITLE, plant, "TW-LK-0042, revision A, 3 March 2025", PURPOSE)
    inputs(sheet, 11, INPUTS)
    allow(sheet, "C16", 0.001, 1, "the mole fraction of CO2 in the kiln gas, 0.001 to 1")
    allow(sheet, "C17", 0.1, 2000, "a positive absolute pressure in the unit below")
    allow(sheet, "C19", 600, 1300, "a temperature in degrees Celsius, 600 to 1300")
    allow(sheet, "C20:C21", 0, 1, "a fraction, 0 to 1")
    allow(sheet, "C22", 0, 10000, "tonnes per day, 0 to 10000")
    sheet.inner.data_validation("C18", {"validate": "list", "source": ["kPa", "bar", "mbar", "atm", "psi"]})
    section(sheet, 24, "Gas in the burning zone, as the affinity takes it")
    sheet.text("B25", "CO2(g)", "label")
    sheet.formula("C25", "=kiln_CO_bar", "native", "0.0000")
    sheet.text("D25", "bar", "unit")
    sheet.text("E25", "kiln_gas", "unit")
    sheet.text("F25", "Activity = partial pressure / 1 bar; the pure solids have activity 1", "note")
    for row, solid in enumerate(("CaO(s)", "CaCO3(s)"), 26):
        sheet.text(f"B{row}", solid, "label")
        sheet.number(f"C{row}", 1, "native", "0")
        sheet.text(f"D{row}", "1", "unit")
        sheet.text(f"E{row}", "", "unit")
        sheet.text(f"F{row}", "Pure solid", "note")
    sample.book.define_name("kiln_gas", "=Calculation!$B$25:$C$27")
    results(sheet, 29, "Results: equilibrium", EQUILIBRIUM)
    results(sheet, 44, "Results: heat and amounts", HEAT)
    checks_met(sheet, 58, len(CHECKS))
    closing(sheet, 60, SAFETY)
    sheet.inner.set_h_pagebreaks([28])


def _pressure(sample: Sample) -> None:
    sheet = sample.sheet("CO2 pressure", [2, 9, 11, 12, 13, 12, 12, 10, 16, 15, 3, 15, 14, 14], repeat=4)
    sheet.merged("B2:N2", "Pressure of CO2 over limestone and lime", "title", 26)
    sheet.merged("B3:N3", "CaCO3 and CaO as pure solids: K = p(CO2) / 1 bar", "subtitle")
    headers = [
        "T\ndegC", "T\nK", "ΔrH°\nkJ/mol", "K\n1", "p(CO2)\nbar", "p(CO2)\nkPa", "1000/T\n1/K",
        "p in kPa, ΔrG°\n(298) held, wrong", "p then too\nsmall by ÷",
    ]  # fmt: skip
    sheet.headers("B5", headers, 34)
    first, last = 6, 5 + len(CELSIUS)
    for row, celsius in enumerate(CELSIUS, first):
        sheet.number(f"B{row}", celsius, "input", "0")
        sheet.formula(f"C{row}", f"=B{row}+273.15", "native", "0.00")
        sheet.formula(f"D{row}", f'=TF.DRH(burning,B{row}&" degC")', "", "0.000")
        sheet.formula(f"E{row}", f"=TF.KEQ(burning,C{row})", "", "0.000E+00")
        sheet.formula(f"F{row}", f"=E{row}", "native", "0.0000")
        sheet.formula(f"G{row}", f'=TF.INUNIT(F{row},"bar","kPa")', "", "0.00")
        sheet.formula(f"H{row}", f"=1000/C{row}", "native", "0.0000", 1000 / (celsius + 273.15))
        held = f'=100*EXP(-TF.DRG(burning,298.15)*1000/(TF.CONSTANT("R")*C{row}))'
        sheet.formula(f"I{row}", held, "wrong", "0.00E+00")
        sheet.formula(f"J{row}", f"=G{row}/I{row}", "wrong", "#,##0")
    for row in (first, 16, last):
        sheet.pin(f"D{row}", "kJ/mol")
        sheet.pin(f"E{row}")
    _start_table(sample, sheet)
    x_of_t, y = f"='CO2 pressure'!$B${first}:$B${last}", f"='CO2 pressure'!$%s${first}:$%s${last}"
    for title, x, place, width, x_axis in (
        ("Pressure of CO2 against T", x_of_t, f"B{last + 2}", 478, axis("T / degC", 650, 1100, 50)),
        ("Pressure of CO2 against 1000 K / T", y % ("H", "H"), f"H{last + 2}", 556,
         axis("1000 K / T", 0.7, 1.1, 0.05, "0.00")),
    ):  # fmt: skip
        lines = [
            Curve("p(CO2)", x, y % ("G", "G")),
            Curve("wrong: ΔrG°(298 K) held", x, y % ("I", "I"), colour=SECOND_COLOUR, broken=True),
        ]
        chart = curves(sample, title, lines)
        chart.set_x_axis(x_axis | {"crossing": x_axis["min"]})
        chart.set_y_axis(axis("p(CO2) / kPa", 1e-6, 1e4, None, "0E+00") | {"log_base": 10, "crossing": 1e-6})
        chart.set_size({"width": width, "height": 350})
        sheet.inner.insert_chart(place, chart, {"object_position": 2})


def _start_table(sample: Sample, sheet: Sheet) -> None:
    """The start of burning against CO2 in the gas, as a table of the spreadsheet."""
    last = 5 + len(PRESSURES)
    headers = ["p(CO2), bar", "Start, K", "Start, degC"]
    sheet.inner.add_table(
        f"L5:N{last}",
        {
            "name": "StartOfBurning", "style": None, "autofilter": False,
            "columns": [{"header": text, "header_format": sample.style("header")} for text in headers],
        },
    )  # fmt: skip
    for row, pressure in enumerate(PRESSURES, 6):
        sheet.number(f"L{row}", pressure, "input", "0.00")
        sheet.formula(f"M{row}", f"=TF.TEQ(burning,L{row})", "", "0.00")
        sheet.formula(f"N{row}", f"=M{row}-273.15", "native", "0.0")
        sheet.pin(f"M{row}", "K")
    allow(sheet, f"L6:L{last}", 1e-6, 100, "a pressure in bar above 0")
    sheet.inner.conditional_format(
        f"L6:N{last}",
        {
            "type": "formula", "criteria": "=$N6>zone_degC",
            "format": sample.book.add_format({"bg_color": "#FBE6D4"}),
        },
    )  # fmt: skip
    note = "Where limestone begins to burn against CO2 in the gas. Shaded: above the temperature of the burning zone."
    sheet.merged(f"L{last + 1}:N{last + 4}", note, "subtitle")


def _heat(sample: Sample) -> None:
    sheet = sample.sheet("Heat", [2, 10, 11, 15, 15, 15, 15, 15, 15, 15])
    sheet.merged("B2:J2", "Heat to burn limestone at a temperature, by both ways", "title", 26)
    note = (
        "First way: heat the stone from 25 degC to T, burn it at T. Second way: burn it at 25 degC, heat the lime and "
        "the CO2 to T. Both must give the same heat (Hess); most of what lies above 25 degC comes back when lime and "
        "gas are cooled against stone and air."
    )
    sheet.merged("B3:J3", note, "text", 46)
    headers = [
        "T\ndegC", "T\nK", "CaCO3 heated\nkJ/mol", "ΔrH° at T\nkJ/mol", "First way\nkJ/mol", "CaO heated\nkJ/mol",
        "CO2 heated\nkJ/mol", "Second way\nkJ/mol", "GJ per tonne\nof CaO",
    ]  # fmt: skip
    sheet.headers("B5", headers, 34)
    for row, celsius in enumerate(BURNING, 6):
        sheet.number(f"B{row}", celsius, "input", "0")
        sheet.formula(f"C{row}", f"=B{row}+273.15", "native", "0.00")
        sheet.formula(f"D{row}", f'=TF.MOLDH("CaCO3(s)",C{row})', "", "0.000")
        sheet.formula(f"E{row}", f"=TF.DRH(burning,C{row})", "", "0.000")
        sheet.formula(f"F{row}", f"=D{row}+E{row}", "native", "0.000")
        sheet.formula(f"G{row}", f'=TF.MOLDH("CaO(s)",C{row})', "", "0.000")
        sheet.formula(f"H{row}", f'=TF.MOLDH("CO2(g)",C{row})', "", "0.000")
        sheet.formula(f"I{row}", f"=burning_enthalpy+G{row}+H{row}", "native", "0.000")
        sheet.formula(f"J{row}", f"=F{row}/mass_lime", "native", "0.000")
    last = 5 + len(BURNING)
    sheet.pin("D14", "kJ/mol")
    sheet.pin("F14", "kJ/mol")
    lines = [
        Curve(name, f"=Heat!$B$6:$B${last}", f"=Heat!${column}$6:${column}${last}", colour=colour)
        for column, name, colour in (
            ("F", "both", INK), ("E", "burn it at T", FIRST_COLOUR), ("D", "heat the stone", SECOND_COLOUR),
        )
    ]  # fmt: skip
    chart = curves(sample, "Heat per mole of CaCO3", lines)
    chart.set_x_axis(axis("T / degC", 0, 1200, 100))
    chart.set_y_axis(axis("kJ/mol", 0, 300, 50))
    chart.set_size({"width": 900, "height": 340})
    sheet.inner.insert_chart(f"B{last + 2}", chart, {"object_position": 2})


def _working(sample: Sample) -> None:
    sheet = sample.sheet("Working", [2, 7, 34, 46, 36, 20, 12, 66])
    sheet.merged("B2:H2", "How one number came about, and the data behind it", "title", 26)
    title = 'Start of burning in the kiln gas: TF.WORKING("TEQ", burning, kiln_CO_bar)'
    working_table(sheet, 4, 12, title, '=TF.WORKING("TEQ",burning,kiln_CO_bar)')
    section(sheet, 19, 'Data of CaCO3: TF.SUBSTANCE("CaCO3(s)")', "B:H")
    sheet.array("C20:E31", '=TF.SUBSTANCE("CaCO3(s)")')
    sheet.inner.set_row(28, 70)
    sheet.pin("F17", "K")
