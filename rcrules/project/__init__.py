"""The project file: rcrules.toml in, Project out."""

from rcrules.project._model import NetFacts, PartFacts, PinFacts, Project, SupplyFacts

__all__ = ["NetFacts", "PartFacts", "PinFacts", "Project", "SupplyFacts"]
