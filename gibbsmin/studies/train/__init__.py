"""Trains: steps in series, each of which settles, changes unreacted, or parts its stream; with recycles.

Files, in the order in which they build on each other: `stream` (what flows), `mixing` (several streams into one),
`change` (what a step does to its inlet), `takes` (what it parts from its outlet), `graph` (the order of the steps),
`recycle` (the steady state of loops), `train` (all of it), `account` (what each step and the whole balance to).
"""
