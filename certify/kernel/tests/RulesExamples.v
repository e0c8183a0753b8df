(** What the words of a rule are true for. The lemmas of RulesSpec.v say the same of all
    numbers; these are their first values, from the OEIS. *)

From Coq Require Import Bool List ZArith.
From Certify Require Import Rules.
Import ListNotations.
Open Scope Z_scope.

(** A000290 *)
Example squares : filter square (range (-9) 60) = [0; 1; 4; 9; 16; 25; 36; 49].
Proof. vm_compute. reflexivity. Qed.

(** A000578, and its negatives *)
Example cubes : filter cube (range (-70) 70) = [-64; -27; -8; -1; 0; 1; 8; 27; 64].
Proof. vm_compute. reflexivity. Qed.

(** A000217 *)
Example triangulars : filter triangular (range (-9) 50) = [0; 1; 3; 6; 10; 15; 21; 28; 36; 45].
Proof. vm_compute. reflexivity. Qed.

(** A000326: not 2, 7, 15, which belong to k < 0 *)
Example pentagonals : filter pentagonal (range (-9) 75) = [0; 1; 5; 12; 22; 35; 51; 70].
Proof. vm_compute. reflexivity. Qed.

(** A000045, as a set *)
Example fibonaccis : filter fibonacci (range (-9) 95) = [0; 1; 2; 3; 5; 8; 13; 21; 34; 55; 89].
Proof. vm_compute. reflexivity. Qed.

(** A000040 *)
Example primes : filter prime (range (-9) 50) = [2; 3; 5; 7; 11; 13; 17; 19; 23; 29; 31; 37; 41; 43; 47].
Proof. vm_compute. reflexivity. Qed.

(** A001597 *)
Example powers : filter power (range (-9) 130) =
  [1; 4; 8; 9; 16; 25; 27; 32; 36; 49; 64; 81; 100; 121; 125; 128].
Proof. vm_compute. reflexivity. Qed.

(** Python 3: 7 // -2 = -4, 7 % -2 = -1, -7 // 2 = -4, -7 % 2 = 1 (Python's reference,
    section 6.7). *)
Example divisions :
  [7 / -2; 7 mod -2; -7 / 2; -7 mod 2; -7 / -2; -7 mod -2] = [-4; -1; -4; 1; 3; -1].
Proof. vm_compute. reflexivity. Qed.

Example no_range : range 1 0 = [] /\ range 5 2 = [] /\ range (-1) 1 = [-1; 0; 1].
Proof. vm_compute. auto. Qed.

(** First coordinate outermost, and a bound that uses the value before it. *)
Example rows : extend (range 1 2) (fun m => range m 3) = [(1, 1); (1, 2); (1, 3); (2, 2); (2, 3)].
Proof. vm_compute. reflexivity. Qed.

Example sets : same_set [1; 2] [2; 1; 1] = true /\ same_set [1; 1] [1; 2] = false
  /\ same_set [1; 2] [1; 1] = false.
Proof. vm_compute. auto. Qed.
