"""The sheet that shows a loop: what stands on it, where on the page, and the file that holds all of them."""
