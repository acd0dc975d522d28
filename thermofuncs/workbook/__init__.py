"""Workbook files: read safely, recalculated, and patched byte by byte."""

from thermofuncs.workbook.addresses import Place
from thermofuncs.workbook.cell_working import CellWorking, working
from thermofuncs.workbook.evaluation import Functions
from thermofuncs.workbook.package import Limits
from thermofuncs.workbook.recalculation import Recalculation, output_path, recalculate

__all__ = [
    "CellWorking",
    "Functions",
    "Limits",
    "Place",
    "Recalculation",
    "output_path",
    "recalculate",
    "working",
]
