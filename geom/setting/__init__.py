"""What the pieces of a design share: stock, fittings, supports, shop, site, drawing."""
