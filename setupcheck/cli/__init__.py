"""The command line: reads arguments, calls the flow, prints the text that comes back."""
