"""What an issued drawing shows, found again by marks or by layers and places."""
