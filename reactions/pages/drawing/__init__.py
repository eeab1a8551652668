"""What the pages draw on the server, as SVG."""
