"""Puts this folder on the path, so that tests of every folder can use `small_files`."""
