"""The picture without a screen, in sheet units."""
