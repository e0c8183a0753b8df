(** * The words of a rule

    Whole numbers are Coq's [Z]; [/] and [mod] round down, as in a claim. What is defined
    here is written to be computed fast; what it means is proved in RulesSpec.v, so a
    reader may read the lemmas there instead. *)

From Coq Require Import Bool List ZArith.
Import ListNotations.
Open Scope Z_scope.
Open Scope lazy_bool_scope.

(** [range lo hi]: the numbers lo, ..., hi; none if [hi < lo]. *)
Fixpoint count_up (n : nat) (lo : Z) : list Z :=
  match n with
  | O => []
  | S n' => lo :: count_up n' (lo + 1)
  end.

Definition range (lo hi : Z) : list Z := count_up (Z.to_nat (hi - lo + 1)) lo.

(** [extend rows f]: each row, followed by each value that [f] gives for it. The nested
    loops of a table, and of vertices with several coordinates. *)
Definition extend {A B : Type} (rows : list A) (f : A -> list B) : list (A * B) :=
  flat_map (fun row => map (pair row) (f row)) rows.

(** [member i l] is "i in {...}", [same_set l m] is "{...} == {...}". *)
Fixpoint member (i : Z) (l : list Z) : bool :=
  match l with
  | [] => false
  | j :: l' => (i =? j) ||| member i l'
  end.

Definition same_set (l m : list Z) : bool :=
  forallb (fun i => member i m) l &&& forallb (fun i => member i l) m.

Definition square (i : Z) : bool := let k := Z.sqrt i in k * k =? i.

Definition triangular (i : Z) : bool :=
  let k := (Z.sqrt (8 * i + 1) - 1) / 2 in k * (k + 1) =? 2 * i.

Definition pentagonal (i : Z) : bool :=
  let k := (Z.sqrt (24 * i + 1) + 1) / 6 in k * (3 * k - 1) =? 2 * i.

(** [root e i]: the greatest [k] with [k ^ e <= i]. Its binary digits but the last are
    those of the root of [i / 2 ^ e]. *)
Fixpoint root_loop (fuel : nat) (e i : Z) : Z :=
  match fuel with
  | O => 0
  | S fuel' =>
      if i <=? 0 then 0
      else let k := 2 * root_loop fuel' e (i / 2 ^ e) in
           if (k + 1) ^ e <=? i then k + 1 else k
  end.

Definition root (e i : Z) : Z := root_loop (Z.to_nat (Z.log2 i + 1)) e i.

Definition cube (i : Z) : bool := root 3 (Z.abs i) ^ 3 =? Z.abs i.

(** If [i = k ^ e] and [k] is not 1, then [2 ^ e <= i]. *)
Definition power (i : Z) : bool :=
  (i =? 1) ||| existsb (fun e => root e i ^ e =? i) (range 2 (Z.log2 i)).

(** [a] and [b] are two consecutive Fibonacci numbers. *)
Fixpoint fibonacci_loop (fuel : nat) (i a b : Z) : bool :=
  match fuel with
  | O => false
  | S fuel' => if i <=? a then i =? a else fibonacci_loop fuel' i b (a + b)
  end.

(** A Fibonacci number is at least twice the last but one: the fuel does not run out. *)
Definition fibonacci (i : Z) : bool :=
  (0 <=? i) &&& fibonacci_loop (2 * Z.to_nat (Z.log2 i) + 5) i 0 1.

(** No [d], [d + 2], [d + 4], ... up to the root of [i] divides it. *)
Fixpoint undivided_loop (fuel : nat) (d i : Z) : bool :=
  match fuel with
  | O => true
  | S fuel' =>
      (i <? d * d) ||| (negb (i mod d =? 0) &&& undivided_loop fuel' (d + 2) i)
  end.

Definition prime (i : Z) : bool :=
  (i =? 2) ||| ((3 <=? i) &&& Z.odd i &&& undivided_loop (Z.to_nat (Z.sqrt i)) 3 i).
