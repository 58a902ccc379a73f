"""An invented world: rubber parts whose truth is known, pulled and measured as a test house would.

It shares nothing with the package under test. Axial force follows from statics, stretch from inverting the law point
by point on a fine grid, sections from an exact Gaussian process. Units N, mm, MPa, g.
"""
