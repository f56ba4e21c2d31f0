"""The table of everything that is served beside the page's own files."""

from curvelab.workbench.calculator_routes import CALCULATOR_ROUTES
from curvelab.workbench.device_routes import DEVICE_ROUTES
from curvelab.workbench.draft_routes import DRAFT_ROUTES
from curvelab.workbench.search_routes import SEARCH_ROUTES
from curvelab.workbench.sheet_routes import SHEET_ROUTES

ROUTES = (*DRAFT_ROUTES, *SHEET_ROUTES, *SEARCH_ROUTES, *DEVICE_ROUTES, *CALCULATOR_ROUTES)
