"""The config: what a person writes, checked, completed and turned into plain numbers."""

from evolve.config.read import Config, read_config, read_config_text

__all__ = ["Config", "read_config", "read_config_text"]
