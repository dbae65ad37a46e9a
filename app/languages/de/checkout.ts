export const checkout = {
  delivery: "Versand",
  paymentDeadline: "Ihre Nummern sind bis {time} für Sie zurückgelegt.",
};
