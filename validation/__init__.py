"""What is wrong, how badly, how far, what would mend it, who accepted it; the exception list."""
