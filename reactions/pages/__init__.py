"""The pages: views, forms and what they draw."""
