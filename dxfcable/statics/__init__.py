"""Statics of cables: plain numbers in, plain numbers out.

Signs and order, once for the whole room: x to the right, y up, points from left to right,
loads positive down, tension positive. Units are whatever the caller uses, consistently.
"""
