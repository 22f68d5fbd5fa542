"""One instance: built, measured, judged, certified."""
