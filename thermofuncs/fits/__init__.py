"""Fits of measured data: laws, least squares, statistics, predictions. Reads no substance data."""

from thermofuncs.fits.cautions import cautions, distance
from thermofuncs.fits.diagnostics import PointDiagnosis, diagnose
from thermofuncs.fits.fitting import Estimate, Fit, fit
from thermofuncs.fits.prediction import FittedTemperature, Prediction, predict, temperature_of
from thermofuncs.fits.reaction_row import reaction_row
from thermofuncs.fits.settings import PLAIN, Settings
from thermofuncs.fits.statistics import (
    Tested,
    aicc,
    chi_square,
    curvature,
    lack_of_fit,
    r_squared,
    runs,
)
from thermofuncs.fits.steps import record_estimate, record_fit
from thermofuncs.fits.values import Statistic, statistic_of

__all__ = [
    "PLAIN",
    "Estimate",
    "Fit",
    "FittedTemperature",
    "PointDiagnosis",
    "Prediction",
    "Settings",
    "Statistic",
    "Tested",
    "aicc",
    "cautions",
    "chi_square",
    "curvature",
    "diagnose",
    "distance",
    "fit",
    "lack_of_fit",
    "predict",
    "r_squared",
    "reaction_row",
    "record_estimate",
    "record_fit",
    "runs",
    "statistic_of",
    "temperature_of",
]
