"""An open document: the plan, its trial, the edit history, its answers, background jobs.

Import from the modules: the window shows before ``answers`` loads the routing core.
"""
