"""The sulfur dioxide converter: K and heat over temperature, the first bed, checks, the working of one cell."""

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
from workbooks.sheets import INK, SECOND_COLOUR, Sample, Sheet

TITLE = "Sulfur dioxide converter: how far bed 1 is from equilibrium"
PURPOSE = (
    "Purpose: from the outlet temperature and the conversion read at bed 1, find the temperature at which that gas "
    "would be at equilibrium, and the distance to it. Method: K from temperature-dependent data (TF functions), ideal "
    "gases, standard pressure 1 bar; the equilibrium temperature is where K equals the reaction quotient Q of the "
    "gas. Limits: ideal gases serve well at converter pressures (common practice); rate and catalyst are not in it."
)
SAFETY = (
    "SO2 and SO3 are toxic and corrosive; SO3 with moisture forms sulfuric acid mist; the reaction is strongly "
    "exothermic and can overheat a bed. These are equilibrium figures, not design or operating limits. Have them "
    "checked by a qualified person before anybody acts on them; local codes, the catalyst supplier's limits and "
    "licensed practice come first."
)
JANAF = "NIST-JANAF Thermochemical Tables, 4th ed., 1998: log Kf of SO3 less that of SO2"
GLENN = "NASA/TP-2002-211556, data file of 2021, evaluated by a reference implementation without scaling of R"
STATES = (
    "Equilibrium of 7 % SO2, 11 % O2, 82 % N2 at 1 bar by a reference implementation on the coefficients of "
    "NASA/TP-2002-211556: that gas must give its own temperature back"
)
SPREAD = "five published sets of data agree within 0.03 for this reaction"

# T in K, log10 K of NIST-JANAF, log10 K of the bundled coefficients by a reference implementation
LOG_K = ((500.0, 5.411, 5.416664), (800.0, 1.537, 1.536888), (1000.0, 0.257, 0.254926))
# T in K, mole fractions of SO2, O2, SO3 at equilibrium
EQUILIBRIA = (
    (693.15, 0.0007570524883, 0.07806931436, 0.07175434975),
    (773.15, 0.004194892372, 0.07965463949, 0.06819182138),
    (873.15, 0.01830592238, 0.0861617984, 0.05356899236),
)
CELSIUS = range(350, 675, 25)
CONVERSIONS = (0.50, 0.60, 0.65, 0.70, 0.75, 0.80, 0.85, 0.90, 0.95, 0.98)
OUTLETS = (440, 460, 480, 500, 520, 540, 560, 580, 600, 620)

INPUTS = (
    Input("Reaction", "SO2(g) + 1/2 O2(g) = SO3(g)", "", "", "reaction",
          "Equation text. The coefficients fix what K means: K = a(SO3) / (a(SO2) √a(O2))"),
    Input("SO2 in the dry feed gas", 7.0, "0.0", "mol/100 mol", "feed_SOtwo", "Analysis of the feed, invented"),
    Input("O2 in the dry feed gas", 11.0, "0.0", "mol/100 mol", "feed_Otwo", "Analysis of the feed, invented"),
    Input("Pressure, absolute", 1.2, "0.00", "bar", "gas_pressure",
          "0.5 to 3 bar; to a gauge reading the barometer is added"),
    Input("Inlet temperature of bed 1", 420.0, "0", "degC", "inlet_degC", "Plant reading, invented"),
    Input("Outlet temperature of bed 1", 580.0, "0", "degC", "outlet_degC", "Plant reading, invented"),
    Input("Conversion of SO2 over bed 1", 0.74, "0.0%", "mol/mol", "conversion",
          "From SO2 at inlet and outlet, invented"),
    Input("Value of K to be found", 20.0, "0.0", "1", "k_wanted", "For the temperature at which K has this value"),
)  # fmt: skip
RESULTS = (
    Result("Outlet temperature", "=outlet_degC+273.15", "0.00", "K", "outlet_K"),
    Result("ΔrH° at the outlet", '=TF.DRH(reaction,outlet_degC&" degC")', "0.000", "kJ/mol", "dr_enthalpy",
           "Negative: heat is set free"),
    Result("ΔrS° at the outlet", "=TF.DRS(reaction,outlet_K)", "0.000", "J/(mol K)", "dr_entropy"),
    Result("ΔrCp° at the outlet", "=TF.DRCP(reaction,outlet_K)", "0.000", "J/(mol K)"),
    Result("ΔrG° at the outlet", "=TF.DRG(reaction,outlet_K)", "0.000", "kJ/mol", "dr_Gibbs"),
    Result("ln K at the outlet", "=TF.LNK(reaction,outlet_K)", "0.0000", "1", "ln_K", "Every step: sheet Working"),
    Result("K at the outlet", "=TF.KEQ(reaction,outlet_K)", "0.000", "1"),
    Result("ln Q of the outlet gas", "=TF.LNQ(reaction,outlet_gas)", "0.0000", "1", "ln_Q"),
    Result("Affinity RT ln(K/Q)", "=TF.AFFINITY(reaction,outlet_K,outlet_gas)", "0.000", "kJ/mol", "gas_affinity",
           "Positive: SO3 still forms"),
    Result("Equilibrium temperature of that gas", "=TF.TEQ(reaction,EXP(ln_Q))", "0.00", "K", "rest_K",
           "K equals Q there"),
    Result("Equilibrium temperature of that gas", "=rest_K-273.15", "0.0", "degC"),
    Result("Distance to equilibrium", "=rest_K-outlet_K", "0.0", "K", "",
           "Small: the bed has done what equilibrium allows"),
    Result("Temperature at which K = 1", "=TF.TEQ(reaction)", "0.00", "K"),
    Result("Temperature at which K is the wanted value", "=TF.TEQ(reaction,k_wanted)", "0.00", "K"),
    Result("Cautions of the equilibrium temperature",
           '=IF(TF.CAUTIONS("TEQ",reaction,EXP(ln_Q))="","none",TF.CAUTIONS("TEQ",reaction,EXP(ln_Q)))', "General", ""),
)  # fmt: skip
CHECKS = (
    *(
        Check(f"log10 K at {kelvin:g} K", f"=TF.LGK(reaction,{kelvin:g})", janaf, 0.03, "1", "0.0000",
              f"{JANAF}; {SPREAD}")
        for kelvin, janaf, _ in LOG_K
    ),
    *(
        Check(f"Temperature of the equilibrium gas of {kelvin:g} K",
              f"=TF.TEQ(reaction,{so_three!r}/({so_two!r}*SQRT({o_two!r})))", kelvin, 0.02, "K", "0.000", STATES)
        for kelvin, so_two, o_two, so_three in EQUILIBRIA
    ),
    Check("ΔrG° = ΔrH° − T ΔrS° at the outlet", "=dr_Gibbs", "=dr_enthalpy-outlet_K*dr_entropy/1000", 1e-9, "kJ/mol",
          "0.000000"),
    Check("ΔrG° = −RT ln K at the outlet", "=dr_Gibbs", '=-TF.CONSTANT("R")*outlet_K*ln_K/1000', 1e-9, "kJ/mol",
          "0.000000"),
    Check("Affinity = RT (ln K − ln Q)", "=gas_affinity", '=TF.CONSTANT("R")*outlet_K*(ln_K-ln_Q)/1000', 1e-9,
          "kJ/mol", "0.000000"),
    Check("ln Q of the gas, function and by hand", "=ln_Q",
          "=LN(INDEX(outlet_gas,3,2)/(INDEX(outlet_gas,1,2)*SQRT(INDEX(outlet_gas,2,2))))", 1e-12, "1", "0.000000"),
    Check('ln K at "580 degC" as text and at 853.15 K', '=TF.LNK(reaction,"580 degC")', "=TF.LNK(reaction,853.15)",
          1e-12, "1", "0.000000"),
    Check("Sum of ln K, cell by cell and in one call", "=SUM('K of T'!H6:H18)", "=SUM('K of T'!K6:K18)", 1e-10, "1",
          "0.000000"),
    Check("Conversion as read and from the heat balance", "=conversion", "='Bed 1'!I30", 0.03, "mol/mol", "0.0000",
          "Sheet Bed 1, row of the outlet reading; the limit is common practice for plant readings"),
)  # fmt: skip


def build(sample: Sample) -> None:
    """All sheets."""
    _calculation(sample)
    _k_of_t(sample)
    _bed(sample)
    sheet = checks(sample, CHECKS)
    for row, (_, _, glenn) in enumerate(LOG_K, 5):
        sheet.expect(f"C{row}", glenn, abs(glenn) * 7e-6 + 5e-7, "derived", GLENN)
    for row, (kelvin, *_) in enumerate(EQUILIBRIA, 5 + len(LOG_K)):
        sheet.expect(f"C{row}", kelvin, 0.02, "derived", STATES, "K")
    _working(sample)


def _calculation(sample: Sample) -> None:
    sheet = sample.sheet("Calculation", [2, 42, 21, 13, 16, 74])
    plant = "Tarnbeck Works, sulfuric acid unit, converter C-201. The plant is invented and so are its readings."
    title_block(sheet, TITLE, plant, "TW-PC-0107, revision A, 3 March 2025", PURPOSE)
    inputs(sheet, 11, INPUTS)
    allow(sheet, "C14:C15", 0.1, 50, "mol per 100 mol of dry feed gas, 0.1 to 50")
    allow(sheet, "C16", 0.5, 3, "an absolute pressure in bar, 0.5 to 3")
    allow(sheet, "C17:C18", 300, 700, "a temperature in degrees Celsius, 300 to 700")
    allow(sheet, "C19", 0.001, 0.999, "the fraction of the SO2 converted, 0.001 to 0.999")
    allow(sheet, "C20", 1e-6, 1e12, "a positive number")
    _gas(sheet)
    results(sheet, 29, "Results", RESULTS)
    checks_met(sheet, 46, len(CHECKS))
    _mistake(sheet)
    closing(sheet, 53, SAFETY)
    sheet.inner.set_h_pagebreaks([28])


def _gas(sheet: Sheet) -> None:
    section(sheet, 22, "Gas at the outlet of bed 1")
    sheet.headers("B23", ["Species", "Partial pressure", "Unit", "mol per\n100 mol feed", "How"], 32)
    moles = (
        ("SO2(g)", "feed_SOtwo*(1-conversion)"),
        ("O2(g)", "feed_Otwo-feed_SOtwo*conversion/2"),
        ("SO3(g)", "feed_SOtwo*conversion"),
        ("N2(g)", "100-feed_SOtwo-feed_Otwo"),
    )
    for row, (species, formula) in enumerate(moles, 24):
        # nothing of ours reads the nitrogen's pressure, so its stored value is worked out here
        inert = 82.0 / (100.0 - 7.0 * 0.74 / 2) * 1.2 if species == "N2(g)" else None
        sheet.text(f"B{row}", species, "label")
        sheet.formula(f"C{row}", f"=E{row}/SUM(E$24:E$27)*gas_pressure", "native", "0.00000", inert)
        sheet.text(f"D{row}", "bar", "unit")
        sheet.formula(f"E{row}", f"={formula}", "native", "0.000")
        sheet.text(f"F{row}", f"{formula}   Activity = partial pressure / 1 bar", "note")
    sheet.sample.book.define_name("outlet_gas", "=Calculation!$B$24:$C$26")
    sheet.sample.name("feed_Ntwo", sheet.name, "E27")


def _mistake(sheet: Sheet) -> None:
    section(sheet, 48, "The usual mistake, and what becomes of it here")
    sheet.text("B49", "ln K from ΔrG° of 298.15 K, used at the outlet", "label")
    sheet.formula("C49", '=-TF.DRG(reaction,298.15)*1000/(TF.CONSTANT("R")*outlet_K)', "wrong", "0.0000")
    sheet.text("B50", "K is then too large by the factor", "label")
    sheet.formula("C50", "=EXP(C49-ln_K)", "wrong", "#,##0")
    for row, note in (
        (49, "−ΔrG°(298.15 K)/(RT), as it is often typed by hand. Nothing here uses it."),
        (50, "Over all temperatures: sheet K of T"),
    ):
        sheet.text(f"D{row}", "1", "unit")
        sheet.text(f"E{row}", "", "unit")
        sheet.text(f"F{row}", note, "note")
    sheet.text("B51", "The same, asked of the function for typed values: refused", "label")
    sheet.formula("C51", "=TF.LNKFROMDRG(TF.DRG(reaction,298.15),outlet_K,298.15)", "wrong")
    sheet.inner.merge_range("D51:F51", "", sheet.sample.style("note"))
    sheet.formula("D51", '=TF.CAUTIONS("LNKFROMDRG",TF.DRG(reaction,298.15),outlet_K,298.15)', "note")
    sheet.inner.set_row(50, 32)
    refused = "ΔrG° of one temperature says nothing about ln K at another: #NUM!, on purpose"
    sheet.expect("C51", "#NUM!", 0.0, "derived", refused)
    sheet.pin("C49")


def _k_of_t(sample: Sample) -> None:
    sheet = sample.sheet("K of T", [2, 9, 11, 11, 11, 11, 11, 10, 14, 10, 14, 16, 13], repeat=4)
    sheet.merged("B2:M2", "Equilibrium constant and heat of reaction over the converter's temperatures", "title", 26)
    sheet.merged("B3:M3", "Reaction and standard state: sheet Calculation; gases at 1 bar", "subtitle")
    headers = [
        "T\ndegC", "T\nK", "ΔrH°\nkJ/mol", "ΔrS°\nJ/(mol K)", "ΔrCp°\nJ/(mol K)", "ΔrG°\nkJ/mol", "ln K\n1", "K\n1",
        "1000/T\n1/K", "ln K, in one\ncall, 1", "ln K, ΔrG°(298)\nheld, wrong", "K then too\nlarge by ×",
    ]  # fmt: skip
    sheet.headers("B5", headers, 34)
    first, last = 6, 5 + len(CELSIUS)
    for row, celsius in enumerate(CELSIUS, first):
        sheet.number(f"B{row}", celsius, "input", "0")
        sheet.formula(f"C{row}", f"=B{row}+273.15", "native", "0.00")
        sheet.formula(f"D{row}", f'=TF.DRH(reaction,B{row}&" degC")', "", "0.000")
        sheet.formula(f"E{row}", f"=TF.DRS(reaction,C{row})", "", "0.000")
        sheet.formula(f"F{row}", f"=TF.DRCP(reaction,C{row})", "", "0.000")
        sheet.formula(f"G{row}", f"=TF.DRG(reaction,C{row})", "", "0.000")
        sheet.formula(f"H{row}", f"=TF.LNK(reaction,C{row})", "", "0.0000")
        sheet.formula(f"I{row}", f"=TF.KEQ(reaction,C{row})", "", "0.000E+00")
        sheet.formula(f"J{row}", f"=1000/C{row}", "native", "0.0000", 1000 / (celsius + 273.15))
        held = f'=-TF.DRG(reaction,298.15)*1000/(TF.CONSTANT("R")*C{row})'
        sheet.formula(f"L{row}", held, "wrong", "0.0000")
        sheet.formula(f"M{row}", f"=EXP(L{row}-H{row})", "wrong", "#,##0")
    sheet.array(f"K{first}:K{last}", f"=TF.LNK(reaction,C{first}:C{last})", {0: ("ours", "0.0000")}, headed=False)
    for row in (first, (first + last) // 2, last):
        sheet.pin(f"D{row}", "kJ/mol")
        sheet.pin(f"H{row}")
        sheet.pin(f"K{row}")
    note = (
        'Column D takes text such as "450 degC", the others kelvin. In a spreadsheet with a decimal comma, use whole '
        "degrees there or kelvin: a quantity text has a decimal point."
    )
    sheet.merged(f"B{last + 1}:M{last + 1}", note, "subtitle", 30)
    for column, title, place, width, x_axis in (
        ("B", "ln K against T", f"B{last + 3}", 478, axis("T / degC", 350, 650, 50)),
        ("J", "ln K against 1000 K / T", f"H{last + 3}", 562, axis("1000 K / T", 1.0, 1.7, 0.1, "0.0")),
    ):
        x, y = f"='K of T'!${column}${first}:${column}${last}", f"='K of T'!$%s${first}:$%s${last}"
        lines = [
            Curve("ln K", x, y % ("H", "H")),
            Curve("wrong: ΔrG°(298 K) held", x, y % ("L", "L"), colour=SECOND_COLOUR, broken=True),
        ]
        chart = curves(sample, title, lines)
        chart.set_x_axis(x_axis)
        chart.set_y_axis(axis("ln K", 0, 16, 2))
        chart.set_size({"width": width, "height": 340})
        sheet.inner.insert_chart(place, chart, {"object_position": 2})


def _bed(sample: Sample) -> None:
    sheet = sample.sheet("Bed 1", [2, 12, 13, 13, 13, 14, 14, 13, 13, 2])
    sheet.merged("B2:I2", "Bed 1: equilibrium curve and adiabatic line", "title", 26)
    section(sheet, 4, "Equilibrium curve: where a gas of this conversion rests", "B:I")
    headers = [
        "Conversion\nof SO2", "SO2\nmol/100 mol", "O2\nmol/100 mol", "SO3\nmol/100 mol", "Total\nmol/100 mol",
        "Q at the\npressure, 1", "T, K = Q\nK", "T, K = Q\ndegC",
    ]  # fmt: skip
    sheet.headers("B5", headers, 34)
    for row, share in enumerate(CONVERSIONS, 6):
        sheet.number(f"B{row}", share, "input", "0%")
        sheet.formula(f"C{row}", f"=feed_SOtwo*(1-B{row})", "native", "0.000")
        sheet.formula(f"D{row}", f"=feed_Otwo-feed_SOtwo*B{row}/2", "native", "0.000")
        sheet.formula(f"E{row}", f"=feed_SOtwo*B{row}", "native", "0.000")
        sheet.formula(f"F{row}", f"=C{row}+D{row}+E{row}+feed_Ntwo", "native", "0.000")
        sheet.formula(f"G{row}", f"=E{row}/(C{row}*SQRT(D{row}/F{row}*gas_pressure))", "native", "0.000")
        sheet.formula(f"H{row}", f"=TF.TEQ(reaction,G{row})", "", "0.00")
        sheet.formula(f"I{row}", f"=H{row}-273.15", "native", "0.0")
    section(sheet, 18, "Adiabatic line: the conversion that heats the feed from the inlet to T", "B:I")
    headers = [
        "T\ndegC", "T\nK", "SO2 heated\nkJ/mol", "O2 heated\nkJ/mol", "N2 heated\nkJ/mol", "Feed heated\nkJ/100 mol",
        "ΔrH° at T\nkJ/mol", "Conversion\nof SO2",
    ]  # fmt: skip
    sheet.headers("B19", headers, 34)
    for row, celsius in enumerate((*OUTLETS, None), 20):
        if celsius is None:
            sheet.formula(f"B{row}", "=outlet_degC", "native", "0")
        else:
            sheet.number(f"B{row}", celsius, "input", "0")
        sheet.formula(f"C{row}", f"=B{row}+273.15", "native", "0.00")
        for column, species in zip("DEF", ("SO2(g)", "O2(g)", "N2(g)"), strict=True):
            heated = f'=TF.MOLDH("{species}",$C{row})-TF.MOLDH("{species}",inlet_degC+273.15)'
            sheet.formula(f"{column}{row}", heated, "", "0.0000")
        sheet.formula(f"G{row}", f"=feed_SOtwo*D{row}+feed_Otwo*E{row}+feed_Ntwo*F{row}", "native", "0.00")
        sheet.formula(f"H{row}", f"=TF.DRH(reaction,C{row})", "", "0.000")
        sheet.formula(f"I{row}", f"=G{row}/(-H{row}*feed_SOtwo)", "native", "0.0%")
    for cell, unit in (("H6", "K"), ("H15", "K"), ("I20", "1"), ("I30", "1")):
        sheet.pin(cell, unit)
    note = (
        "Last row: the outlet as read. Heat balance: the feed is heated from the inlet to T, then reacts at T; no heat "
        "is lost. Where the curves cross, an adiabatic bed is at equilibrium and goes no further."
    )
    sheet.merged("B31:I31", note, "subtitle", 42)
    _bed_chart(sample, sheet)


def _bed_chart(sample: Sample, sheet: Sheet) -> None:
    lines = [
        Curve("equilibrium", "='Bed 1'!$I$6:$I$15", "='Bed 1'!$B$6:$B$15"),
        Curve("adiabatic line", "='Bed 1'!$B$20:$B$29", "='Bed 1'!$I$20:$I$29", colour=SECOND_COLOUR, broken=True),
    ]
    chart = curves(sample, "Conversion against temperature in bed 1", lines, marked=False)
    point = {"type": "diamond", "size": 11, "border": {"color": INK}, "fill": {"color": "#F2B632"}}
    chart.add_series(
        {
            "name": "outlet as read", "categories": "=Calculation!$C$18", "values": "=Calculation!$C$19",
            "marker": point, "line": {"none": True},
        }
    )  # fmt: skip
    chart.set_x_axis(axis("T / degC", 420, 700, 40))
    chart.set_y_axis(axis("conversion of SO2", 0, 1, 0.1, "0%"))
    chart.set_size({"width": 620, "height": 560})
    sheet.inner.insert_chart("K4", chart, {"object_position": 2})


def _working(sample: Sample) -> None:
    sheet = sample.sheet("Working", [2, 7, 30, 42, 36, 20, 12, 66])
    sheet.merged("B2:H2", "How one number came about, and the data behind it", "title", 26)
    title = 'ln K at the outlet temperature: TF.WORKING("LNK", reaction, outlet_K)'
    working_table(sheet, 4, 11, title, '=TF.WORKING("LNK",reaction,outlet_K)')
    section(sheet, 18, 'Data of SO3: TF.SUBSTANCE("SO3(g)")', "B:H")
    sheet.array("C19:E28", '=TF.SUBSTANCE("SO3(g)")')
    sheet.inner.set_row(27, 70)
    sheet.pin("F16")
