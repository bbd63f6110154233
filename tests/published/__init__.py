"""Every published value this project answers for, and what the functions give."""
