(** * Long lists of numbers, as text

    A list of numbers that is written out takes Coq long to read: for each number a
    notation has to be interpreted, and a chain of constructors to be typed. Here facts and
    steps are texts of about one character a number, which are unpacked when the proof is
    checked. Nothing has to be believed about this file: whatever comes out of it is checked
    like any other list of facts and steps.

    A text is a list of lists of positive numbers. A number from 1 to 61 is a character, from
    [A] to [}] in ASCII; a larger one is followed by characters from the blank to [?], which
    append five bits each. [@] ends a list. [~] after three numbers d, k, l stands for a
    copy: of the list d lists back, l numbers from the k-th on. Any other character, such as
    a line end, means nothing. *)

From Coq Require Import Init.Byte List PArith FMapPositive.
From Certify Require Import Propagation Mirror Clauses.
Import ListNotations.

(** Sixteen characters in a node keep the term small; [x00] fills up the last one. *)
Inductive text :=
  | nothing
  | more (a b c d e f g h i j k l m n o p : byte) (rest : text).

Fixpoint text_of (s : list byte) : text :=
  match s with
  | [] => nothing
  | a :: b :: c :: d :: e :: f :: g :: h :: i :: j :: k :: l :: m :: n :: o :: p :: rest =>
      more a b c d e f g h i j k l m n o p (text_of rest)
  | _ =>
      let c i := nth i s x00 in
      more (c 0) (c 1) (c 2) (c 3) (c 4) (c 5) (c 6) (c 7)
        (c 8) (c 9) (c 10) (c 11) (c 12) (c 13) (c 14) x00 nothing
  end.

Fixpoint characters (t : text) : list byte :=
  match t with
  | nothing => []
  | more a b c d e f g h i j k l m n o p rest =>
      a :: b :: c :: d :: e :: f :: g :: h :: i :: j :: k :: l :: m :: n :: o :: p
      :: characters rest
  end.

Declare Scope text_scope.
Delimit Scope text_scope with text.
String Notation text text_of characters : text_scope.

(** What has been read: the list at hand, its last number first; the lists before it, by
    their numbers and as a list, the last one first; and the number of the list at hand. *)
Record reading := {
  hand : list positive;
  done : list (list positive);
  by_number : PositiveMap.t (list positive);
  now : positive
}.

Definition start : reading :=
  {| hand := []; done := []; by_number := PositiveMap.empty _; now := 1 |}.

Definition take_in_hand (r : reading) (l : list positive) : reading :=
  {| hand := l; done := done r; by_number := by_number r; now := now r |}.

Definition end_list (r : reading) : reading :=
  let l := rev_append (hand r) [] in
  {| hand := []; done := l :: done r; by_number := PositiveMap.add (now r) l (by_number r);
     now := Pos.succ (now r) |}.

Definition copy (r : reading) : reading :=
  match hand r with
  | l :: k :: d :: rest =>
      match PositiveMap.find (now r - d)%positive (by_number r) with
      | Some old =>
          take_in_hand r (rev_append (take l (skipn (Nat.pred (Pos.to_nat k)) old)) rest)
      | None => r
      end
  | _ => r
  end.

Definition append (b : bool) (p : positive) : positive := if b then xI p else xO p.

Definition append_high (b : bool) (high : option positive) : option positive :=
  match high with
  | Some p => Some (append b p)
  | None => if b then Some xH else None
  end.

Definition read_character (r : reading) (c : byte) : reading :=
  match to_bits c with
  | (false, (true, (true, (true, (true, (true, (true, false))))))) => copy r
  | (b0, (b1, (b2, (b3, (b4, (b5, (true, false))))))) =>
      match append_high b0 (append_high b1 (append_high b2 (append_high b3 (append_high b4
        (append_high b5 None))))) with
      | Some p => take_in_hand r (p :: hand r)
      | None => end_list r
      end
  | (b0, (b1, (b2, (b3, (b4, (true, (false, false))))))) =>
      match hand r with
      | p :: l =>
          take_in_hand r (append b0 (append b1 (append b2 (append b3 (append b4 p)))) :: l)
      | [] => r
      end
  | _ => r
  end.

Fixpoint read_text (r : reading) (t : text) : reading :=
  match t with
  | nothing => r
  | more a b c d e f g h i j k l m n o p rest =>
      let four r a b c d :=
        read_character (read_character (read_character (read_character r a) b) c) d in
      read_text (four (four (four (four r a b c d) e f g h) i j k l) m n o p) rest
  end.

Definition unpack (l : list text) : list (list positive) :=
  rev_append (done (fold_left read_text l start)) [].

(** A fact begins with the number of its sort. *)
Definition read_fact (l : list positive) : fact :=
  match l with
  | 1 :: v :: _ => Degree v
  | 2 :: s => Cut s
  | 3 :: u :: v :: _ => Required u v
  | 4 :: k :: image => Mirror k image
  | _ => Cut []
  end%positive.

(** Literals and hints take turns. *)
Fixpoint read_steps (l : list (list positive)) : list step :=
  match l with
  | c :: hints :: rest => (c, hints) :: read_steps rest
  | _ => []
  end.

Definition packed (facts steps : list text) : clauses :=
  {| facts := map read_fact (unpack facts); steps := read_steps (unpack steps) |}.
