"""The laws that measured data are fitted with, and their forms around an inner reference temperature θ.

    van 't Hoff           ln K = ln K(θ) + ΔrH°/R (1/θ − 1/T)
    Clarke-Glew           … + ΔrCp°(θ)/R [ln(T/θ) + θ/T − 1]
      with its slope      … + (θ/2R) (dΔrCp°/dT) [T/θ − θ/T − 2 ln(T/θ)]
    Arrhenius             ln k = ln k(θ) + Ea/R (1/θ − 1/T)
    Eyring                ln(k h/(kB T)) = ΔS‡/R − ΔH‡/(RT), a van 't Hoff line of K‡
    Clausius-Clapeyron    ln p = ln p(θ) + ΔvapH/R (1/θ − 1/T), the vapour ideal, the liquid's volume left out
    Antoine               log p = A − B/(C + T), nonlinear in C

The inner θ is where the parameters of a straight line decorrelate, the mean of 1/T, so nothing is lost to
rounding; what is reported at another temperature is carried there with the full covariance.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import lru_cache
from typing import Literal

from scipy import constants as codata

from thermofuncs.errors import UnknownLaw

# Boltzmann's constant over Planck's, both exact in the SI: the frequency factor of Eyring's equation [1/(K s)]
LN_FREQUENCY = math.log(codata.k / codata.h)

Coefficients = tuple[float, ...]
Family = Literal["reaction", "Arrhenius", "Eyring", "vapour"]


@dataclass(frozen=True, slots=True, eq=False)
class Law:
    """A law; each is one object, equal to itself alone.

    Parameters
    ----------
    name : str. As it is shown.
    family : str. Which quantities it has: those of a reaction, of Arrhenius, of Eyring, of a vapour.
    count : int. How many parameters it has.
    symbol : K, k or p. What is measured.
    equation : str. The form that is fitted.
    source : str. Where it was published.
    nonlinear : bool. Not linear in its parameters (Antoine).
    """

    name: str
    family: Family
    count: int
    symbol: str
    equation: str
    source: str
    nonlinear: bool = False

    def offset(self, temperature: float) -> float:
        """What the logarithm of the measured quantity has over the fitted one: ln(kB T/h) for Eyring."""
        return LN_FREQUENCY + math.log(temperature) if self.family == "Eyring" else 0.0


CLARKE_GLEW_SOURCE = "Clarke & Glew, Trans. Faraday Soc. 62 (1966) 539 (citation from memory)"
_LINE = "ln {0} = ln {0}(θ) + {1}/R (1/θ − 1/T)"
VAN_T_HOFF = Law(
    "van 't Hoff", "reaction", 2, "K", _LINE.format("K", "ΔrH°"),
    "van 't Hoff equation integrated with a constant ΔrH°, IUPAC Green Book, 3rd ed., 2007, section 2.11",
)  # fmt: skip
CLARKE_GLEW = Law(
    "Clarke-Glew", "reaction", 3, "K", VAN_T_HOFF.equation + " + ΔrCp°/R [ln(T/θ) + θ/T − 1]", CLARKE_GLEW_SOURCE
)
CLARKE_GLEW_SLOPE = Law(
    "Clarke-Glew", "reaction", 4, "K", CLARKE_GLEW.equation + " + (θ/2R) (dΔrCp°/dT) [T/θ − θ/T − 2 ln(T/θ)]",
    CLARKE_GLEW_SOURCE,
)  # fmt: skip
ARRHENIUS = Law(
    "Arrhenius", "Arrhenius", 2, "k", _LINE.format("k", "Ea"),
    "Arrhenius equation, IUPAC Green Book, 3rd ed., 2007, section 2.12",
)  # fmt: skip
EYRING = Law(
    "Eyring", "Eyring", 2, "k", "ln(k h/(kB T)) = ln K‡(θ) + Δ‡H°/R (1/θ − 1/T)",
    "Eyring, J. Chem. Phys. 3 (1935) 107 (citation from memory); IUPAC Green Book, 3rd ed., 2007, section 2.12",
)  # fmt: skip
CLAUSIUS_CLAPEYRON = Law(
    "Clausius-Clapeyron", "vapour", 2, "p", _LINE.format("p", "ΔvapH"),
    "Clausius-Clapeyron equation, the vapour an ideal gas and the volume of the liquid left out",
)  # fmt: skip
ANTOINE = Law(
    "Antoine", "vapour", 3, "p", "log p = A − B/(C + T)", "Antoine, C. R. Acad. Sci. 107 (1888) 681 (from memory)",
    nonlinear=True,
)  # fmt: skip

LAWS = (VAN_T_HOFF, CLARKE_GLEW, ARRHENIUS, EYRING, CLAUSIUS_CLAPEYRON, ANTOINE)
LAW_NAMES = ", ".join(law.name for law in LAWS)
_APOSTROPHES = str.maketrans("", "", "'’‘`´ʼ′-‐‑–− .")
_BY_KEY = {law.name.translate(_APOSTROPHES).casefold(): law for law in LAWS}


@lru_cache(maxsize=256)
def read_law(text: str) -> Law:
    """The law of a name, in any case, with either apostrophe or none.

    Raises
    ------
    UnknownLaw
        The name is not in the list.
    """
    law = _BY_KEY.get(text.translate(_APOSTROPHES).casefold())
    if law is None:
        raise UnknownLaw(given=text[:60], known=LAW_NAMES)
    return law


_CURVED = {
    law: Law(law.name, law.family, 3, law.symbol, law.equation, CLARKE_GLEW_SOURCE) for law in LAWS if law.count == 2
}


def with_one_more(law: Law) -> Law | None:
    """The law that has one more term in the heat capacity, by which curvature is tested; None where there is none."""
    return _CURVED.get(law)


def basis(count: int, temperature: float, theta: float) -> Coefficients:
    """The functions of a temperature [K] that a linear law multiplies with its coefficients.

    The differences are formed from z = (T − θ)/θ, so that they keep their digits near θ.
    """
    z = (temperature - theta) / theta
    reciprocal = z / temperature
    if count == 2:
        return (1.0, reciprocal)
    log = math.log1p(z)
    curved = log - z / (1.0 + z)
    if count == 3:
        return (1.0, reciprocal, curved)
    return (1.0, reciprocal, curved, 0.5 * theta * (z + z / (1.0 + z) - 2.0 * log))


def log_value(law: Law, c: Coefficients, temperature: float, theta: float) -> tuple[float, Coefficients]:
    """The fitted logarithm at a temperature [K], and its derivatives by the coefficients."""
    if law.nonlinear:
        x = (temperature - theta) / (temperature * theta)
        below = 1.0 + c[2] * x
        share = x / below
        return c[0] + c[1] * share, (1.0, share, -c[1] * share * share)
    row = basis(law.count, temperature, theta)
    value = c[0] + c[1] * row[1]
    for a, b in zip(c[2:], row[2:], strict=True):
        value += a * b
    return value, row


def enthalpy(law: Law, c: Coefficients, temperature: float, theta: float) -> tuple[float, Coefficients]:
    """T² times the slope of the logarithm, which is ΔrH°/R [K], and its derivatives by the coefficients."""
    if law.count == 2:
        return c[1], (0.0, 1.0)
    if law.nonlinear:
        x = (temperature - theta) / (temperature * theta)
        below = 1.0 + c[2] * x
        squared = 1.0 / (below * below)
        return c[1] * squared, (0.0, squared, -2.0 * c[1] * squared * x / below)
    d = temperature - theta
    row = (0.0, 1.0, d, 0.5 * d * d)[: law.count]
    return math.fsum(a * b for a, b in zip(c, row, strict=True)), row


def heat_capacity(law: Law, c: Coefficients, temperature: float, theta: float) -> tuple[float, Coefficients]:
    """The slope of ΔrH°/R, which is ΔrCp°/R [1], and its derivatives by the coefficients; zero for a line."""
    row = (0.0, 0.0, 1.0, temperature - theta)[: law.count]
    return math.fsum(a * b for a, b in zip(c, row, strict=True)), row
