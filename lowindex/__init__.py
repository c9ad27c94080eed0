"""lowindex: does a finitely presented group have a nilpotent subgroup of finite index? A verdict, and a witness that can be checked."""

__version__ = "0.1.0"
