"""Results as readings: what the sheet shows about the focus, as plain data.

Import from the modules: ``reading`` needs nothing, the others load the routing core.
"""
