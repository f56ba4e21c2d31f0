"""The workbench: the reading and the library over HTTP on this computer, for one page and for other programs."""
