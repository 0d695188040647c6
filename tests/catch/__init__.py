"""The catch test: slips made in the good jobs one at a time, and every number of them spoilt in turn. What is noticed?"""
