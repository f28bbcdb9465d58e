// In the head, so that what scripts show point by point is not laid out whole while it is still being read.
document.documentElement.classList.add("scripted");
