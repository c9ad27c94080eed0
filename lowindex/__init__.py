"""lowindex: does a finitely presented group have a nilpotent subgroup of finite index?"""
