"""Theorems: a claim and its evidence as files of Coq that use the kernel in certify/kernel."""
