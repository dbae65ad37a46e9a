export const checkout = {
  delivery: "Delivery",
  /** On the payment page, beside its button. {time} names its zone. */
  paymentDeadline: "Your numbers are held for you until {time}.",
};
