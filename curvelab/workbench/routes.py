"""The table of everything that is served beside the page's own files."""

from curvelab.workbench.device_routes import DEVICE_ROUTES
from curvelab.workbench.draft_routes import DRAFT_ROUTES

ROUTES = (*DRAFT_ROUTES, *DEVICE_ROUTES)
