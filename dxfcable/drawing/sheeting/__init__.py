"""Parts of the force-diagram sheets: papers, views at paper size, tables, title block, writers."""
