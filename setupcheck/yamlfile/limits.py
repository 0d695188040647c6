"""How large a YAML file may be. Our screening choices: a long job file has 20 kB, 2,000 values, depth 8."""

LARGEST_FILE = 2_000_000  # bytes
MOST_VALUES = 50_000  # values and keys of one file; keeps a hostile file within a second
DEEPEST = 20  # lists and maps inside each other
MOST_PROBLEMS = 200  # found in one file before the reading stops
LONGEST_KEY = 100  # characters
MOST_DIGITS = 30  # of one plain number
