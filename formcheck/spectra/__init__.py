"""Spectra of colourants: the wavelength grid, measured files, absorption bands, box models, particles."""
