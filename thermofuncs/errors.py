"""What can go wrong, and the worksheet value that each kind shows.

ThermofuncsError
    NotUnderstood   #VALUE!  an argument that cannot be read or does not fit
        WorkbookRefused      a workbook file that is not read, or not written, any further
    NotAvailable    #N/A     a substance or property that the data lacks
    NotValid        #NUM!    a state, range or fit outside what is valid

Every class below carries one sentence as a template; the data stands apart in attributes and the
sentence is composed when it is shown.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import ClassVar


@dataclass(frozen=True, slots=True)
class CellError:
    """A worksheet error value, with the sentence behind it where it is ours.

    Parameters
    ----------
    value : str. The worksheet's own spelling, such as ``#NUM!``.
    sentence : str. Why, or empty where the error came in with an argument.
    """

    value: str
    sentence: str = ""

    def __str__(self) -> str:
        """Show the worksheet value."""
        return self.value


class ThermofuncsError(Exception):
    """A calculation that cannot be done, with the sentence that says why and what would do."""

    worksheet_value: ClassVar[str] = "#VALUE!"
    template: ClassVar[str] = "{text}"

    def __init__(self, **data: object) -> None:
        super().__init__()
        self.data = data

    @property
    def sentence(self) -> str:
        """The sentence, composed from the class's template and this error's data."""
        return self.template.format(**self.data)

    def __str__(self) -> str:
        """Show the sentence."""
        return self.sentence

    def as_cell(self) -> CellError:
        """The worksheet value with its sentence."""
        return CellError(self.worksheet_value, self.sentence)


class NotUnderstood(ThermofuncsError):
    """An argument cannot be read, or has the wrong dimension or shape."""

    worksheet_value = "#VALUE!"


class NotAvailable(ThermofuncsError):
    """The data lacks the substance or the property, or cannot tell which is meant."""

    worksheet_value = "#N/A"


class NotValid(ThermofuncsError):
    """The arguments were read, but there is no valid answer for them."""

    worksheet_value = "#NUM!"


# --- arguments -----------------------------------------------------------------------------------


class MissingArgument(NotUnderstood):
    """A required argument was left out."""

    template = "{argument} is missing: {function} needs {meaning}."


class BlankArgument(NotAvailable):
    """A required argument points to a blank cell."""

    template = "{argument} is a blank cell: {function} needs {meaning}."


class WrongType(NotUnderstood):
    """An argument is not the sort of thing that is needed."""

    template = "{argument} is {given}: {needed} is needed."


class BadArguments(NotUnderstood):
    """Several arguments are wrong at once."""

    template = "{text}"


class UnknownFunction(NotUnderstood):
    """No function has this name."""

    template = "There is no function {name}. Near names: {near}."


class UnknownOption(NotUnderstood):
    """An option word is not understood."""

    template = "options has {word!r}, which {function} does not know: the words are {known}."


# --- combinations and reactions of data ------------------------------------------------------------


class OutsideRange(NotValid):
    """A temperature lies outside the range of the data."""

    template = "{argument} = {given} is outside the data of {what}: {ranges}"


class NothingToExtrapolate(NotValid):
    """A row that is a value at one temperature."""

    template = "options has extrapolate, but {substance} is known at {at} K alone: there is no Cp to continue."


class OutsideDouble(NotValid):
    """A value is too large or too small for a number."""

    template = "{what} is {where} the range of numbers (its natural logarithm is {lnk}): use {use}."


class UncertaintyUnknown(NotAvailable):
    """A data row does not state an uncertainty."""

    template = (
        "{substance} has no stated uncertainty of {property}: give a row with u(dfH) and u(S) in a data table."
    )


class NotAFunctionOfData(NotAvailable):
    """A reaction row has no substances."""

    template = "{what} is a whole reaction row of the data table, which states no uncertainty."


# --- units and quantity texts ----------------------------------------------------------------------


class UnknownUnit(NotUnderstood):
    """A unit's spelling is not in the closed list."""

    template = "{argument} has the unit {given!r}, which is not known. {near}"


class WrongDimension(NotUnderstood):
    """A unit measures something else than is needed."""

    template = (
        "{argument} is in {given}, a unit of {given_dimension}: a unit of {needed_dimension} is needed, "
        "such as {examples}.{remedy}"
    )


class GaugePressure(NotUnderstood):
    """A pressure counts from the atmosphere."""

    template = (
        "{argument} has {given!r}, a gauge pressure: add the local atmospheric pressure "
        "and write an absolute one, such as bar or psi."
    )


class ShiftedScale(NotUnderstood):
    """A temperature scale whose zero is not absolute stands where a factor is needed."""

    template = (
        "{argument}: from {given} to {needed} the zero moves and no factor converts. "
        "A difference of temperatures is written as degC difference."
    )


class DecimalComma(NotUnderstood):
    """A quantity text has a comma in its number."""

    template = "{argument} is {given!r}, with a comma in the number: write {proposal}."


class NotAQuantity(NotUnderstood):
    """A text is not a number with a unit."""

    template = "{argument} is the text {given!r}, which {why}, such as 25 degC or 1.5 bar."


class BelowAbsoluteZero(NotValid):
    """A temperature is not above absolute zero."""

    template = "{argument} is {given}: a temperature above absolute zero ({zero}) is needed."


class QuantityOutsideNumbers(NotValid):
    """A quantity is too large or too small for a number."""

    template = "{argument} is {given}, which is outside the range of numbers."


class NoSuchConstant(NotAvailable):
    """No constant has this name."""

    template = "{argument} is {given!r}, which is not in the list of constants: {known}."


# --- relations with typed constants ----------------------------------------------------------------


class GibbsEnergyOfAnotherTemperature(NotValid):
    """A Gibbs energy is used at a temperature that it does not belong to."""

    template = (
        "drg belongs to {belongs_to} K and t is {wanted} K; ΔrG° changes with temperature, so the two may "
        "differ by 0.5 K at most. Take ln K at {belongs_to} K and carry it with LNKAT."
    )


class OutsideNumbers(NotValid):
    """A result is too large or too small for a number."""

    template = "{what} is outside the range of numbers{detail}. {remedy}"


class NotAboveZero(NotValid):
    """A number must be positive."""

    template = "{argument} is {given}: {what} above 0 is needed."


class BlankInRange(NotAvailable):
    """A cell of a range is blank where every cell counts."""

    template = "{argument} has a blank cell, number {place} in row order: fill it, or write 0 if 0 is meant."


class TextInRange(NotUnderstood):
    """A cell of a range holds no number."""

    template = "{argument} has {given} as cell number {place} in row order: a number is needed."


class DifferentLengths(NotUnderstood):
    """Two ranges that go together have different lengths."""

    template = (
        "{first} has {n_first} cells and {second} has {n_second}: "
        "ranges of equal length are needed, one value for each."
    )


class UnknownBasis(NotUnderstood):
    """An equilibrium constant's basis is not in the closed list."""

    template = "{argument} is {given!r}: the bases are {known}."


class UnknownVapourForm(NotUnderstood):
    """A vapour-pressure form is not in the closed list."""

    template = (
        "form is {given!r}, {why}: write five-constant, or Antoine with lg or ln, a pressure unit and "
        "a temperature unit, such as Antoine lg mmHg degC."
    )


class WrongCount(NotUnderstood):
    """A range has the wrong number of constants."""

    template = "{argument} has {given} numbers: {needed} are needed."


class NoVapourPressure(NotValid):
    """The constants give no vapour pressure, or no temperature, here."""

    template = "{what}: {why}"


class OutsideConstantsRange(NotValid):
    """A temperature lies outside the range given with the constants."""

    template = (
        "t is {given} K, and the constants hold from {low} K to {high} K. "
        "Leave the two limits out of constants to extrapolate, with a caution."
    )


class RequiredHere(NotUnderstood):
    """An optional argument is needed by another one."""

    template = "{argument} is missing: {needed_by} needs {meaning}."


# --- workbook files ------------------------------------------------------------------------------


class WorkbookRefused(NotUnderstood):
    """A workbook file is not read any further."""


class NotAWorkbook(WorkbookRefused):
    """The file is missing or of another kind."""

    template = (
        "{path} cannot be read as a workbook: {text}. "
        "Give an .xlsx or .xlsm file, saved without a password by a spreadsheet."
    )


class WorkbookTooLarge(WorkbookRefused):
    """A size, a count or a ratio is past its limit."""

    template = "{path} is refused: it has {text}, and the limit is {limit}. Split the workbook."


class HostileArchive(WorkbookRefused):
    """The archive is built as no spreadsheet builds one."""

    template = "{path} is refused: {text}. No spreadsheet writes that; save the workbook again from one."


class DamagedWorkbook(WorkbookRefused):
    """The file is a workbook that cannot be read to its end."""

    template = "{path} is damaged: {text}. Open it in a spreadsheet, let it repair the file, save it again."


class NoSuchCell(WorkbookRefused):
    """A cell that was asked for is not there, or has no call to explain."""

    template = "{cell}: {text}."


class OutputRefused(WorkbookRefused):
    """The output cannot be written."""

    template = "{path} is not written: {text}. The input is unchanged; name another file with -o."


# --- substances ----------------------------------------------------------------------------------


class UnknownSubstance(NotAvailable):
    """A substance is in neither the data table nor the bundled data."""

    template = (
        "{argument}: {given!r} is not in the data.{near} A row for it in a data table of your own supplies it."
    )


class AmbiguousSubstance(NotAvailable):
    """Several substances fit what was written."""

    template = "{argument}: {given!r} can be {candidates}: write the one that is meant."


class PhaseNotAvailable(NotAvailable):
    """The data has the formula, but not in the phase that was asked for."""

    template = (
        "{argument}: {given!r} is not in the data, which has {candidates}.{remark} "
        "A row for it in a data table of your own supplies it."
    )


class OnlyAnEnthalpy(NotAvailable):
    """The publisher gives no heat capacity."""

    template = (
        "{argument}: {given!r} has only an enthalpy at one temperature in the data, no heat capacity and no "
        "entropy. A row for it in a data table of your own supplies it."
    )


class OnlyGibbsEnergy(NotAvailable):
    """An ion whose source gives ΔfG° alone."""

    template = (
        "{substance} has only ΔfG° at 298.15 K in the data, so it has no {property}. "
        "A row for it in a data table of your own supplies it."
    )


class InertCopy(NotAvailable):
    """A record that stands for a feed which does not react."""

    template = (
        "{argument}: {given!r} is a copy for combustion calculations that is kept from reacting; "
        "write {original}."
    )


class NoReferenceElement(NotAvailable):
    """An element has no reference phase in the data."""

    template = "{argument}: the data has no reference phase of the element {given!r}."


class NoAtomicMass(NotUnderstood):
    """A symbol is no element, or an element without a standard atomic mass."""

    template = "{argument} has {given!r}, which is no element with an atomic mass in the data."


class BadDataTable(NotUnderstood):
    """Cells of a user's data table cannot be used."""

    template = "{argument}: {faults}"


# --- the catalogue ---------------------------------------------------------------------------------


class TooManyArguments(NotUnderstood):
    """More arguments than the function has."""

    template = "{given} arguments were given, at most {most} are taken: {function}."


class ShapesDiffer(NotUnderstood):
    """Ranges whose shapes do not go together."""

    template = "The ranges do not fit each other: {shapes}. Equal shapes, or a column against a row, are needed."


class NotANumber(NotValid):
    """The result is no finite number."""

    template = "{function} has no finite value for these arguments."


class NothingFound(NotAvailable):
    """A search without a match."""

    template = 'Nothing matches "{text}".'


class OneCallOnly(NotUnderstood):
    """The working of something that has none."""

    template = "There is no working of {function}: {why}"


# --- states and activities -------------------------------------------------------------------------


class NoRoot(NotValid):
    """K does not have the value between the limits."""

    template = "K of {what} is not {k} anywhere from {low} to {high} K: {ends}."


class NotPositive(NotValid):
    """A value that must be positive."""

    template = "{argument} = {given} must be positive and finite."


class BareElectron(NotUnderstood):
    """A bare electron where only data counts."""

    template = "A bare e- is an electron in BALANCED, IMBALANCE and EMF only: write e-(g) for the gas of the data."


class UserReactionBasis(NotUnderstood):
    """The standard pressure of a whole-reaction row cannot be moved."""

    template = "options has atm, but {what} is a whole row of the data table whose phases are not all written."


class BadActivityTable(NotUnderstood):
    """A cell of the activities that is no activity."""

    template = (
        "activities of {species}: {given} is neither a number nor a quantity of pressure, molality or"
        ' concentration, such as "0.3 atm"; two columns are needed, species and value.'
    )


class ActivityNotPositive(NotValid):
    """An activity of zero or below."""

    template = "The activity of {species} is {given}: it must be positive, as its logarithm is taken."


class ActivityMissing(NotAvailable):
    """A gas or solute without an activity."""

    template = (
        "activities has no value for {species}: a gas or solute needs one; only a pure phase may be left"
        " out{remark}."
    )


class ActivityRow(NotUnderstood):
    """A row of the activities that is no pair."""

    template = "activities has {given}: two columns are needed, species and activity."


class QuantityOfAnotherPhase(NotUnderstood):
    """A pressure for a solute, a concentration for a gas, either for a pure phase."""

    template = (
        'activities of {species}: "{given}" is a {kind}. A gas has a pressure, a solute (aq) a molality or'
        " concentration; the activity of a pure phase is a number."
    )


class StrangeActivity(NotUnderstood):
    """A species of the table that the reaction does not hold once."""

    template = "activities has {species}, which is not one of the reaction's species, or stands twice: {known}."


class ElectronCount(NotValid):
    """The number of electrons does not fit the reaction."""

    template = "electrons = {given} does not fit: {needed} is needed."


# --- formulas and equations ------------------------------------------------------------------------


class FormulaNotRead(NotUnderstood):
    """A text is no formula."""

    template = '{argument} has "{given}", which is no formula: {why}.'


class TwoReadings(NotUnderstood):
    """A digit before a sign may be a count or a charge."""

    template = '{argument} has "{given}", which has two readings: write {one} or {other}.'


class FormulaTooLong(NotUnderstood):
    """A formula over the limit."""

    template = '{argument} has a formula of more than {most} characters, beginning "{given}".'


class EquationTooLong(NotUnderstood):
    """An equation over the limit."""

    template = '{argument} has more than {most} characters, beginning "{given}".'


class NotOneSeparator(NotUnderstood):
    """An equation without exactly one sign between its sides."""

    template = '{argument} "{given}" has {count} signs between its sides: one of =, ->, →, ⇌, <=> is needed.'


class EmptySide(NotUnderstood):
    """A side or a term of an equation is empty."""

    template = '{argument} "{given}" has an empty place: a species is needed on each side and around each +.'


class CoefficientNotRead(NotUnderstood):
    """A coefficient that is no positive number."""

    template = '{argument} has "{given}": a coefficient is a positive number such as 2, 0.5, 1/2 or ½.'


class CoefficientNotGiven(NotUnderstood):
    """A question mark where a number is needed."""

    template = '{argument} has "{given}": ? is for BALANCED only, a coefficient is needed here.'


class NothingReacts(NotUnderstood):
    """Both sides are the same."""

    template = '{argument} "{given}" has the same on both sides: nothing reacts.'


class Unbalanced(NotUnderstood):
    """Atoms or charge differ between the sides."""

    template = '{argument} "{what}" does not balance: {missing}.'


class CannotBalance(NotValid):
    """No coefficients conserve atoms and charge."""

    template = 'equation "{what}" cannot be balanced: {why}.'


class SeveralReactions(NotValid):
    """The coefficients are not unique."""

    template = (
        'equation "{what}" holds {count} independent reactions, so its coefficients are not unique:'
        " fix some of them, or write the reactions apart."
    )


class WrongSide(NotValid):
    """A species whose coefficient is not positive."""

    template = 'equation "{what}" balances only with {species} on the other side or left out.'


# --- fits of measured data -------------------------------------------------------------------------


class UnknownLaw(NotUnderstood):
    """A law's name is not in the closed list."""

    template = "law is {given!r}: the laws are {known}."


class UnknownQuantity(NotUnderstood):
    """A quantity that the law does not have."""

    template = "quantity is {given!r}, which a fit of {law} does not give: the quantities are {known}."


class UnknownColumn(NotUnderstood):
    """What the measured column holds is not understood, or does not fit the law."""

    template = "y_is is {given!r}, {why}: for {law} it is {known}."


class BadOptionValue(NotUnderstood):
    """An option has a value that cannot be used."""

    template = "options has {given!r}: {needed} is needed, such as {example}."


class OptionsClash(NotUnderstood):
    """Options that exclude each other."""

    template = "options has {first} and {second}: {why}."


class NotAboveZeroInRange(NotValid):
    """A cell of a range must be positive and finite."""

    template = "{argument} has {given} as cell number {place} in row order: {what} above 0 is needed{why}."


class TooFewPoints(NotValid):
    """A fit with fewer points, or different temperatures, than parameters."""

    template = (
        "A fit of {law} has {parameters} parameters and needs points at {parameters} different temperatures; "
        "given: {given}. {remedy}"
    )


class PointsDoNotDetermine(NotValid):
    """The points leave a combination of the parameters open."""

    template = (
        "The points do not determine the {parameters} parameters of {law}: the temperatures are too close to each "
        "other. Measure over a wider range, or fit a law with fewer parameters."
    )


class NoUncertainty(NotAvailable):
    """A fit whose points leave nothing over for an uncertainty."""

    template = (
        "{what} needs more points than parameters, or known uncertainties: {n} points determine {parameters} "
        "parameters exactly. Add points, or give u and the option u_known."
    )


class NoStatistic(NotAvailable):
    """A statistic that these points cannot give."""

    template = "{what} is not available: {why}."


class NoConvergence(NotValid):
    """An iterated fit that does not settle."""

    template = "The fit of {law} does not settle: {why}. {remedy}"


class NoFittedTemperature(NotValid):
    """The fitted law does not have the value."""

    template = "y_value = {given} is not reached by the fit anywhere from {low} to {high} K: there it runs from {ends}."


class NoReactionRow(NotUnderstood):
    """A law whose fit is no reaction of a data table."""

    template = "law is {law}, whose fit gives no ΔrH° and ΔrS° of a reaction: {remedy}."
